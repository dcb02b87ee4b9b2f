import { afterAll, beforeEach, describe, expect, it } from 'vitest';
import { batchState } from '@/lib/fleet/batch-state';
import { LOT_STATES } from '@/lib/fleet/lot';
import { listBatches } from '@/lib/services/batches/list-batches';
import { lineOf, makeBatch } from '@/tests/support/batch-world';
import { type FloorWorld, openFloorWorld } from '@/tests/support/floor-world';

let floor: FloorWorld;
const opened: FloorWorld[] = [];
beforeEach(async () => {
  floor = await openFloorWorld({ rigs: 2 });
  opened.push(floor);
});
afterAll(() => Promise.all(opened.map((one) => one.close())));

describe('the list of batches', () => {
  const list = async (input: object) => listBatches({ ctx: await floor.as('operator'), input });
  const names = async (input: object) => (await list(input)).batches.map(({ name }) => name);

  it('searches names, numbers and labels, filters, sorts and pages', async () => {
    await makeBatch(floor, [lineOf(floor, { label: 'CLK7' })], { name: 'Clock', priority: 2 });
    await makeBatch(floor, [lineOf(floor)], { name: 'arm_100%', dueAt: '2026-12-01T07:00:00.000Z' });
    await makeBatch(floor, [lineOf(floor)], {
      name: 'Bench',
      queue: false,
      dueAt: '2026-12-04T07:00:00.000Z',
    });
    expect(await names({})).toEqual(['arm_100%', 'Bench', 'Clock']);
    expect(await names({ sort: 'name', descending: 'true' })).toEqual(['Clock', 'Bench', 'arm_100%']);
    expect(await names({ sort: 'priority' })).toEqual(['Clock', 'arm_100%', 'Bench']);
    expect(await names({ search: 'clk7' })).toEqual(['Clock']);
    expect(await names({ search: '_100%' })).toEqual(['arm_100%']);
    expect(await names({ search: '%' })).toEqual(['arm_100%']);
    expect(await names({ search: '#2' })).toEqual(['arm_100%']);
    expect(await names({ due: 'overdue' })).toEqual(['arm_100%']);
    expect(await names({ due: 'week' })).toEqual(['arm_100%', 'Bench']);
    expect(await names({ due: 'none' })).toEqual(['Clock']);
    expect(await names({ state: 'draft' })).toEqual(['Bench']);
    expect(await names({ state: 'done' })).toEqual([]);
    expect(await names({ wire: floor.wireId, page: 2 })).toEqual([]);
    expect(await list({ state: 'nonsense', page: 'x' })).toMatchObject({ total: 3, page: 1, pages: 1 });
    expect((await list({})).batches[0]).toMatchObject({
      lines: 1,
      pieces: 20,
      wires: [{ id: floor.wireId }],
    });
  });

  it('says the same state as lib/fleet for every mix of lots', async () => {
    const batchId = await makeBatch(floor, [lineOf(floor, { pieces: 2 })]);
    await floor.world.query('alter table lots disable trigger user');
    await floor.world.query(
      'insert into lots (line_id, number, pieces, queued_at) select line_id, 2, 1, now() from lots',
    );
    for (const one of LOT_STATES) {
      for (const two of LOT_STATES) {
        const [rigId, otherId] = floor.rigIds;
        const onRig = (state: string) => (['waiting', 'withdrawn'].includes(state) ? null : undefined);
        const set = 'update lots set state = $1, rig_id = $2 where number = $3';
        await floor.world.query(set, [one, onRig(one) === null ? null : rigId, 1]);
        await floor.world.query(set, [two, onRig(two) === null ? null : otherId, 2]);
        const { batches } = await list({ state: 'all' });
        const state = batchState({ queued: true, withdrawn: false, lots: [one, two] });
        expect([one, two, batches.find(({ id }) => id === batchId)?.state]).toEqual([one, two, state]);
      }
    }
  });
});
