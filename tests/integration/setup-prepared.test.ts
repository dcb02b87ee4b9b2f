import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { bindRigs } from '@/lib/services/agents/bind-rigs';
import { publishProfile } from '@/lib/services/rigs/publish-profile';
import { takeOutOfService } from '@/lib/services/rigs/take-out-of-service';
import { loadSpool } from '@/lib/services/spools/load-spool';
import { exampleRigProfile } from '@/tests/support/example-rig';
import { openFloorWorld, prepare, type FloorWorld } from '@/tests/support/floor-world';

let floor: FloorWorld;
let rigId: string;
let runId: string;
const RIGS = 5;
let used = 0;
beforeAll(async () => {
  floor = await openFloorWorld({ rigs: RIGS });
});
afterAll(() => floor.close());

beforeEach(async () => {
  rigId = floor.rigIds[used] ?? '';
  used += 1;
  ({ runId } = await prepare(floor, rigId, 20));
});

const ordersOf = (rig: string) =>
  floor.world.query<{ kind: string }>(
    `select kind from commands where rig_id = $1 and kind <> 'take-program' order by issued_at, kind`,
    [rig],
  );
const stateOfRun = async () =>
  (await floor.world.query<{ state: string }>('select state from runs where id = $1', [runId]))[0]?.state;
const fence = async () =>
  (await floor.world.query<{ fence: number }>('select fence from rigs where id = $1', [rigId]))[0]?.fence ??
  0;
const begin = () => floor.world.query(`update runs set state = 'cutting' where id = $1`, [runId]);
const publish = async () =>
  publishProfile({
    ctx: await floor.as('maintainer'),
    input: { rigId, profile: exampleRigProfile(), reason: 'measured anew' },
  });

describe('a lot that has not begun', () => {
  it('is asked back when the profile changes, and is the rig’s until the agent says so', async () => {
    const before = await fence();
    await publish();
    expect((await ordersOf(rigId)).map(({ kind }) => kind)).toContain('drop-program');
    expect(await fence()).toBe(before + 1);
    expect(await stateOfRun()).toBe('prepared');
  });

  it('is asked back when the rig goes out of service', async () => {
    await takeOutOfService({ ctx: await floor.as('maintainer'), input: { rigId, reason: 'belt torn' } });
    expect(await ordersOf(rigId)).toEqual([{ kind: 'drop-program' }]);
  });

  it('keeps its rig with its agent', async () => {
    const { actor } = floor.agent();
    const others = floor.rigIds.filter((id) => id !== rigId);
    const moved = bindRigs({
      ctx: await floor.as('owner'),
      input: { agentId: actor.agentId, rigIds: others },
    });
    await expect(moved).rejects.toMatchObject({ code: 'rig-busy' });
  });
});

describe('a run that is under way', () => {
  it('ends with the profile it began with, on a rig in service', async () => {
    await begin();
    await expect(publish()).rejects.toMatchObject({ code: 'rig-busy' });
    const out = takeOutOfService({
      ctx: await floor.as('maintainer'),
      input: { rigId, reason: 'belt torn' },
    });
    await expect(out).rejects.toMatchObject({ code: 'rig-busy' });
  });

  it('keeps its spool while it cuts, and gets another while it is held', async () => {
    await begin();
    const ctx = await floor.as('operator');
    const unload = () => loadSpool({ ctx, input: { rigId, spoolId: null } });
    await expect(unload()).rejects.toMatchObject({ code: 'rig-busy' });
    await floor.world.query(`update runs set state = 'held' where id = $1`, [runId]);
    await unload();
  });
});
