import { expect } from 'vitest';
import { randomUUID } from 'node:crypto';
import { batches, batchLines, lots } from '@/db/schema/batches';
import type { Profile } from '@/lib/program/profile';
import { SOFTWARE } from '@/agent/software';
import type { AgentEvent, EventBody } from '@/lib/protocol/events';
import type { Report, RigReport } from '@/lib/protocol/report';
import { addAgent } from '@/lib/services/agents/add-agent';
import { addBlade } from '@/lib/services/blades/add-blade';
import { fitBlade } from '@/lib/services/blades/fit-blade';
import type { AgentActor, PersonActor, ServiceContext } from '@/lib/services/context';
import { addRig } from '@/lib/services/rigs/add-rig';
import { publishNotes } from '@/lib/services/rigs/publish-notes';
import { publishProfile } from '@/lib/services/rigs/publish-profile';
import { prepareRun } from '@/lib/services/runs/prepare-run';
import { addSpool } from '@/lib/services/spools/add-spool';
import { loadSpool } from '@/lib/services/spools/load-spool';
import { ingestEvents } from '@/lib/services/traffic/ingest-events';
import { pairAgent } from '@/lib/services/traffic/pair-agent';
import { recordReport } from '@/lib/services/traffic/record-report';
import { addWire } from '@/lib/services/wires/add-wire';
import { exampleRigProfile } from '@/tests/support/example-rig';
import { NOW, openWorld, type World } from '@/tests/support/setup-world';

export const CHALLENGE = 'a-nonce-of-the-agent';

/** The test's clock: handed to each service as the request's time. */
export class TestClock {
  nowMs = NOW.getTime();
  now = () => new Date(this.nowMs);
  iso = () => this.now().toISOString();
  pass = (ms: number) => {
    this.nowMs += ms;
  };
}

/** A workshop with one agent, its rigs, wire, spools and blades, ready to be given lots. */
export interface FloorWorld {
  world: World;
  clock: TestClock;
  wireId: string;
  rigIds: string[];
  token: string;
  agent: () => ServiceContext<AgentActor>;
  as: (...roles: Parameters<World['as']>) => Promise<ServiceContext<PersonActor>>;
  system: () => ServiceContext;
  close: () => Promise<void>;
}

async function addEquippedRig(ctx: ServiceContext, wireId: string, index: number, profile: Profile) {
  const { id: rigId } = await addRig({ ctx, input: { name: `Rig ${index}`, benchOrder: index } });
  await publishProfile({ ctx, input: { rigId, profile, reason: 'first profile' } });
  const fullText = 'Shut the guard, keep hands out of the jaws, and know where the hardware stop is.';
  await publishNotes({ ctx, input: { rigId, points: ['The guard is shut.'], fullText } });
  const spool = await addSpool({ ctx, input: { label: `S-${index}`, wireId, lengthMm: 100_000 } });
  await loadSpool({ ctx, input: { rigId, spoolId: spool.id } });
  const blade = await addBlade({ ctx, input: { label: `B-${index}`, model: 'flush cutter' } });
  await fitBlade({ ctx, input: { bladeId: blade.id, rigId } });
  return rigId;
}

export async function openFloorWorld(
  options: { rigs?: number; profile?: Profile } = {},
): Promise<FloorWorld> {
  const world = await openWorld();
  const clock = new TestClock();
  const owner = await world.as('owner');
  const kind = { gaugeAwg: 30, conductor: 'silvered copper', insulation: 'ETFE', colour: 'GN' };
  const { id: wireId } = await addWire({ ctx: owner, input: { ...kind, outsideDiameterMm: 0.5 } });
  const rigIds: string[] = [];
  for (let index = 1; index <= (options.rigs ?? 1); index += 1) {
    rigIds.push(await addEquippedRig(owner, wireId, index, options.profile ?? exampleRigProfile()));
  }
  const offer = await addAgent({ ctx: owner, input: { name: 'Bench', rigIds } });
  const paired = await pairAgent({
    ctx: world.system(),
    input: { protocol: 1, code: offer.code, software: SOFTWARE },
  });
  const actor: AgentActor = { kind: 'agent', agentId: paired.agentId, name: paired.name };
  const system = () => world.system(clock.now());
  return {
    world,
    clock,
    wireId,
    rigIds,
    token: paired.token,
    system,
    agent: () => ({ ...system(), actor }),
    as: async (...roles) => ({ ...(await world.as(...roles)), now: clock.now() }),
    close: world.close,
  };
}

/** A queued batch of one line of one lot. */
export async function addLot(
  floor: FloorWorld,
  line: Partial<typeof batchLines.$inferInsert> & { pieces: number },
): Promise<{ batchId: string; lineId: string; lotId: string }> {
  const { world, clock, wireId } = floor;
  const { actor } = await world.as('scheduler');
  const [batch] = await world.db
    .insert(batches)
    .values({ name: 'Panel loom', createdBy: actor.personId, createdAt: clock.now(), queuedAt: clock.now() })
    .returning();
  const [made] = await world.db
    .insert(batchLines)
    .values({
      batchId: batch?.id ?? '',
      position: 1,
      label: 'a-b',
      wireId,
      lengthMm: 120,
      toleranceMinusMm: 0,
      tolerancePlusMm: 3,
      ...line,
    })
    .returning();
  const [lot] = await world.db
    .insert(lots)
    .values({ lineId: made?.id ?? '', number: 1, pieces: line.pieces, queuedAt: clock.now() })
    .returning();
  return { batchId: batch?.id ?? '', lineId: made?.id ?? '', lotId: lot?.id ?? '' };
}

/** Gives a new lot to a rig, as dispatch does. */
export async function prepare(floor: FloorWorld, rigId: string, pieces: number) {
  const made = await addLot(floor, { pieces });
  const prepared = await floor.world.db.transaction((db) =>
    prepareRun({ ctx: { ...floor.system(), db }, input: { lotId: made.lotId, rigId } }),
  );
  if (!prepared.ok) throw new Error(prepared.reason);
  return { ...made, rigId, runId: prepared.runId };
}

/** One journal of the agent: numbers events as it is told them, and uploads. */
export class TestJournal {
  readonly journalId = randomUUID();
  #last = 0;

  constructor(private readonly floor: FloorWorld) {}

  number(...bodies: EventBody[]): AgentEvent[] {
    return bodies.map((body) => {
      this.#last += 1;
      return { sequence: this.#last, at: this.floor.clock.iso(), body };
    });
  }

  upload(events: readonly AgentEvent[]) {
    const input = { protocol: 1, journalId: this.journalId, events };
    return ingestEvents({ ctx: this.floor.agent(), input });
  }

  tell(...bodies: EventBody[]) {
    return this.upload(this.number(...bodies));
  }
}

/** What an agent says of a rig on which everything is as law 5 wants it. */
export function goodReport(floor: FloorWorld, rigId: string, over: Partial<RigReport> = {}): RigReport {
  const readAt = floor.clock.iso();
  return {
    rigId,
    port: 'open',
    portProblem: null,
    firmware: null,
    signals: {
      guard: { reading: 'closed', readAt },
      wire: { reading: 'present', readAt },
      heater: { reading: 'off', targetC: 0, actualC: 20, readAt },
    },
    runner: 'holding-program',
    runId: null,
    programSha256: null,
    piecesCut: 0,
    holdReason: null,
    workHold: false,
    challenge: CHALLENGE,
    fence: 1,
    virtualDisplay: null,
    ...over,
  };
}

export function report(floor: FloorWorld, ...rigs: RigReport[]) {
  const input: Report = {
    protocol: 1,
    sentAt: floor.clock.iso(),
    software: SOFTWARE,
    journalId: randomUUID(),
    backlog: 0,
    rigs,
  };
  return recordReport({ ctx: floor.agent(), input });
}

/** The run's own row of numbers and states. */
export async function runRow(floor: FloorWorld, runId: string) {
  const [row] = await floor.world.query<{
    state: string;
    cut: number;
    trims: number;
    surplus: number;
    wire: number;
    doubt: number | null;
    measured: number;
  }>(
    `select state, cut, trims, surplus, wire_used_mm::float8 as wire, doubt_piece as doubt,
       measured_through as measured from runs where id = $1`,
    [runId],
  );
  if (!row) throw new Error('There is no such run');
  return row;
}

/** Kinds of the alarms that stand. */
export async function standingAlarms(floor: FloorWorld): Promise<string[]> {
  const rows = await floor.world.query<{ kind: string }>(
    'select kind from alarms where ended_at is null order by kind',
  );
  return rows.map(({ kind }) => kind);
}

/** Bodies of `piece-cut` from one number to another. */
export function cuts(run: { rigId: string; runId: string }, from: number, through: number): EventBody[] {
  return Array.from({ length: through - from + 1 }, (_, index) => ({
    kind: 'piece-cut',
    rigId: run.rigId,
    runId: run.runId,
    piece: from + index,
    wireMm: 120,
    jawsClosedAt: NOW.toISOString(),
  }));
}

export const errorCode = (code: string) => expect.objectContaining({ code }) as unknown;
