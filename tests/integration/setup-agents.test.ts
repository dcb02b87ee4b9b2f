import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { LEAST_AGENT_VERSION } from '@/lib/protocol/version';
import { addAgent } from '@/lib/services/agents/add-agent';
import { bindRigs } from '@/lib/services/agents/bind-rigs';
import { listAgents } from '@/lib/services/agents/list-agents';
import { renewPairingCode } from '@/lib/services/agents/renew-pairing-code';
import { revokeAgent } from '@/lib/services/agents/revoke-agent';
import { addRig } from '@/lib/services/rigs/add-rig';
import { publishProfile } from '@/lib/services/rigs/publish-profile';
import { pairAgent } from '@/lib/services/traffic/pair-agent';
import { exampleRigProfile } from '@/tests/support/example-rig';
import { NOW, openWorld, type World } from '@/tests/support/setup-world';

let world: World;
let rigIds: string[];
beforeAll(async () => {
  world = await openWorld();
  const ctx = await world.as('owner');
  const names = ['Curlew', 'Dunlin', 'Knot'];
  rigIds = await Promise.all(
    names.map(async (name, index) => (await addRig({ ctx, input: { name, benchOrder: index + 1 } })).id),
  );
});
afterAll(() => world.close());

const code = (code: string) => expect.objectContaining({ code }) as unknown;
const after = (minutes: number) => new Date(NOW.getTime() + minutes * 60_000);
const pair = (typed: string, at = NOW) =>
  pairAgent({ ctx: world.system(at), input: { protocol: 1, code: typed, software: 'test' } });
const fences = async () =>
  (await world.query<{ fence: number }>('select fence from rigs order by bench_order')).map(
    ({ fence }) => fence,
  );

describe('a pairing code', () => {
  it('is read out in any case, works once, and is stored nowhere', async () => {
    const ctx = await world.as('owner');
    const { code: offered, agentId } = await addAgent({ ctx, input: { name: 'Once', rigIds: [] } });
    expect(offered).toMatch(/^([2-9A-HJKMNP-Z]{4}-){3}[2-9A-HJKMNP-Z]{4}$/);
    const [row] = await world.query<{ stored: string }>(
      'select agents::text as stored from agents where id = $1',
      [agentId],
    );
    expect(row?.stored).not.toContain(offered);
    const answer = await pair(offered.toLowerCase().replaceAll('-', ' '));
    expect(answer.agentId).toBe(agentId);
    await expect(pair(offered)).rejects.toEqual(code('pairing-refused'));
  });

  it('gives an agent that asks again with the token it made the same answer, and nobody else', async () => {
    const ctx = await world.as('owner');
    const { code: offered, agentId } = await addAgent({ ctx, input: { name: 'Again', rigIds: [] } });
    const ask = (token: string) =>
      pairAgent({ ctx: world.system(), input: { protocol: 1, code: offered, software: 'test', token } });
    const token = 'a-token-that-the-agent-has-made-itself';
    const first = await ask(token);
    expect(first).toEqual({ agentId, name: 'Again', token });
    expect(await ask(token)).toEqual(first);
    await expect(ask(`${token}-of-another`)).rejects.toEqual(code('pairing-refused'));
    await expect(pair(offered)).rejects.toEqual(code('pairing-refused'));
  });

  it('is too old after thirty minutes', async () => {
    const ctx = await world.as('owner');
    const { code: offered } = await addAgent({ ctx, input: { name: 'Late', rigIds: [] } });
    await expect(pair(offered, after(30))).rejects.toEqual(code('pairing-refused'));
    expect(await pair(offered, new Date(after(30).getTime() - 1))).toMatchObject({ name: 'Late' });
  });

  it('of before is worth nothing once there is a new one', async () => {
    const ctx = await world.as('owner');
    const first = await addAgent({ ctx, input: { name: 'Renewed', rigIds: [] } });
    const second = await renewPairingCode({ ctx, input: { agentId: first.agentId } });
    await expect(pair(first.code)).rejects.toEqual(code('pairing-refused'));
    expect(await pair(second.code)).toMatchObject({ name: 'Renewed' });
  });
});

describe('the software of an agent', () => {
  it('is shown as it was told, with whether it is too old to start anything', async () => {
    const ctx = await world.as('owner');
    const { code: offered, agentId } = await addAgent({ ctx, input: { name: 'Aged', rigIds: [] } });
    const shown = async () => (await listAgents({ ctx })).find(({ id }) => id === agentId);
    expect(await shown()).toMatchObject({ software: null, tooOld: false });
    const input = { protocol: 1, code: offered, software: 'ellwand-agent 0.1.9' };
    await pairAgent({ ctx: world.system(), input });
    expect(await shown()).toMatchObject({ software: 'ellwand-agent 0.1.9', tooOld: true });
    const software = `ellwand-agent ${LEAST_AGENT_VERSION}`;
    await world.query('update agents set software = $1 where id = $2', [software, agentId]);
    expect(await shown()).toMatchObject({ software, tooOld: false });
  });
});

describe('a revoked agent', () => {
  it('has neither token nor code, and comes back by a new code only', async () => {
    const ctx = await world.as('owner');
    const offer = await addAgent({ ctx, input: { name: 'Gone', rigIds: [] } });
    const input = { agentId: offer.agentId };
    await revokeAgent({ ctx, input });
    await expect(pair(offer.code)).rejects.toEqual(code('pairing-refused'));
    const pairing = async () => (await listAgents({ ctx })).find(({ id }) => id === offer.agentId)?.pairing;
    expect(await pairing()).toBe('revoked');
    const again = await renewPairingCode({ ctx, input });
    expect(await pairing()).toBe('waiting');
    await pair(again.code);
    expect(await pairing()).toBe('paired');
  });
});

describe('a rig’s agent', () => {
  it('changes with a higher fence, for each rig that changed hands and no other', async () => {
    const ctx = await world.as('owner');
    const [curlew, dunlin, knot] = rigIds;
    const east = await addAgent({ ctx, input: { name: 'East', rigIds: [curlew, dunlin] } });
    expect(await fences()).toEqual([2, 2, 1]);
    const west = await addAgent({ ctx, input: { name: 'West', rigIds: [dunlin, knot] } });
    expect(await fences()).toEqual([2, 3, 2]);
    await bindRigs({ ctx, input: { agentId: west.agentId, rigIds: [knot] } });
    expect(await fences()).toEqual([2, 4, 2]);
    const bound = Object.fromEntries(
      (await listAgents({ ctx })).map(({ id, rigs }) => [id, rigs.map(({ name }) => name)]),
    );
    expect([bound[east.agentId], bound[west.agentId]]).toEqual([['Curlew'], ['Knot']]);
  });

  it('is told to read its rigs again when a profile is published, once it is paired', async () => {
    const ctx = await world.as('owner');
    const [curlew] = rigIds;
    const commands = () =>
      world.query<{ kind: string; rigId: string }>('select kind, rig_id as "rigId" from commands');
    const publish = () =>
      publishProfile({ ctx, input: { rigId: curlew, profile: exampleRigProfile(), reason: 'test' } });
    await publish();
    expect(await commands()).toEqual([]);
    const { id: agentId } = (await listAgents({ ctx })).find(({ name }) => name === 'East') ?? {};
    await pair((await renewPairingCode({ ctx, input: { agentId } })).code);
    await publish();
    expect(await commands()).toEqual([{ kind: 'reload-rigs', rigId: curlew }]);
  });

  it('is an owner’s to choose, among rigs that there are', async () => {
    const maintainer = await world.as('maintainer');
    const owner = await world.as('owner');
    for (const verb of [addAgent, bindRigs, renewPairingCode, revokeAgent]) {
      await expect(verb({ ctx: maintainer, input: {} })).rejects.toEqual(code('not-allowed'));
    }
    const input = { name: 'Nowhere', rigIds: ['11111111-1111-4111-8111-111111111111'] };
    await expect(addAgent({ ctx: owner, input })).rejects.toEqual(code('bad-input'));
    expect((await listAgents({ ctx: owner })).map(({ name }) => name)).not.toContain('Nowhere');
  });
});
