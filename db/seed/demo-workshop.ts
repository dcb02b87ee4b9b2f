import type { Role } from '@/lib/fleet/rights';
import { addAgent } from '@/lib/services/agents/add-agent';
import { addBlade } from '@/lib/services/blades/add-blade';
import type { PersonActor, ServiceContext } from '@/lib/services/context';
import { addPerson } from '@/lib/services/people/add-person';
import { createFirstOwner } from '@/lib/services/people/create-first-owner';
import { addSpool } from '@/lib/services/spools/add-spool';
import { addWire } from '@/lib/services/wires/add-wire';
import { queueDemoBatches } from './demo-batches';
import type { DemoContexts } from './demo-contexts';
import { makeDemoRig } from './demo-rig';
import { DEMO_PEOPLE, WORKSHOP_NAME } from './demo/people';
import { DEMO_AGENTS, DEMO_RIGS } from './demo/rigs';
import { BLADE_MODEL, CONDUCTOR, DEMO_SPOOLS, DEMO_WIRES, SPARE_BLADES, wireKey } from './demo/stock';

/** The demo's computer carries its code itself, whenever it is first started. */
const PAIRING_VALID_MS = 10 * 365 * 24 * 3_600_000;

/** Makes the demo workshop through the services that the pages call. Answers the agents' pairing codes, in order. */
export async function makeDemoWorkshop(ctx: ServiceContext, password: string): Promise<string[]> {
  const as = await makePeople(ctx, password);
  const wireIds = await makeWires(as);
  const spoolIds = await makeSpools(as, wireIds);
  for (const label of SPARE_BLADES) {
    await addBlade({ ctx: as.maintainer, input: { label, model: BLADE_MODEL } });
  }
  const rigIds = new Map<string, string>();
  for (const [index, rig] of DEMO_RIGS.entries()) {
    const spoolId = spoolIds[index] ?? null;
    rigIds.set(rig.name, await makeDemoRig(as, rig, { benchOrder: index + 1, spoolId }));
  }
  const codes = await makeAgents(as, rigIds);
  await queueDemoBatches(as, wireIds);
  return codes;
}

async function makePeople(ctx: ServiceContext, password: string): Promise<DemoContexts> {
  const personOf = (role: Role) => {
    const person = DEMO_PEOPLE.find((candidate) => candidate.role === role);
    if (!person) throw new Error(`The demo has no ${role}`);
    return person;
  };
  const contextOf = (role: Role, personId: string): ServiceContext<PersonActor> => ({
    ...ctx,
    actor: { kind: 'person', personId, name: personOf(role).name, roles: [role] },
  });
  const { name, email } = personOf('owner');
  const first = await createFirstOwner({
    ctx,
    input: { workshopName: WORKSHOP_NAME, name, email, password },
  });
  const owner = contextOf('owner', first.id);
  const add = async (role: Role) => {
    const person = personOf(role);
    const input = { name: person.name, email: person.email, roles: [role], password };
    return contextOf(role, (await addPerson({ ctx: owner, input })).id);
  };
  return {
    owner,
    operator: await add('operator'),
    scheduler: await add('scheduler'),
    maintainer: await add('maintainer'),
  };
}

async function makeWires(as: DemoContexts): Promise<Map<string, string>> {
  const ids = new Map<string, string>();
  for (const wire of DEMO_WIRES) {
    const added = await addWire({ ctx: as.scheduler, input: { ...wire, conductor: CONDUCTOR } });
    ids.set(wireKey(wire), added.id);
  }
  return ids;
}

async function makeSpools(as: DemoContexts, wireIds: Map<string, string>): Promise<string[]> {
  const ids: string[] = [];
  for (const { label, lengthM, place, ...wire } of DEMO_SPOOLS) {
    const input = { label, wireId: wireIds.get(wireKey(wire)), lengthMm: lengthM * 1000, place };
    ids.push((await addSpool({ ctx: as.operator, input })).id);
  }
  return ids;
}

async function makeAgents(as: DemoContexts, rigIds: Map<string, string>): Promise<string[]> {
  const codes: string[] = [];
  for (const { name, rigs } of DEMO_AGENTS) {
    const input = { name, rigIds: rigs.map((rig) => rigIds.get(rig)) };
    const offer = await addAgent({ ctx: as.owner, input, validMs: PAIRING_VALID_MS });
    codes.push(offer.code);
  }
  return codes;
}
