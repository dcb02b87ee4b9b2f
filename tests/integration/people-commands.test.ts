import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { addAgent } from '@/lib/services/agents/add-agent';
import { disablePerson } from '@/lib/services/people/disable-person';
import { addRig } from '@/lib/services/rigs/add-rig';
import { issueCommand } from '@/lib/services/traffic/issue-command';
import { openWorld, type World } from '@/tests/support/setup-world';

let world: World;
beforeAll(async () => {
  world = await openWorld();
});
afterAll(() => world.close());

describe('what a disabled person asked of a rig', () => {
  it('is taken back where no agent has it yet, but for stops', async () => {
    const owner = await world.as('owner');
    const operator = await world.as('operator');
    const other = await world.as('maintainer');
    const { id: rigId } = await addRig({ ctx: owner, input: { name: 'Curlew', benchOrder: 1 } });
    await addAgent({ ctx: owner, input: { name: 'Bench', rigIds: [rigId] } });
    const shown = await issueCommand(world.system(), operator.actor.personId, { kind: 'show-code', rigId });
    const runId = '11111111-1111-4111-8111-111111111111';
    const stop = await issueCommand(world.system(), operator.actor.personId, { kind: 'stop', rigId, runId });
    const others = await issueCommand(world.system(), other.actor.personId, { kind: 'show-code', rigId });
    await disablePerson({ ctx: owner, input: { personId: operator.actor.personId } });
    const states = await world.query<{ id: string; state: string }>('select id, state from commands');
    expect(Object.fromEntries(states.map(({ id, state }) => [id, state]))).toEqual({
      [shown]: 'expired',
      [stop]: 'pending',
      [others]: 'pending',
    });
  });
});
