import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { LOT_TRANSITIONS } from '@/lib/fleet/lot';
import { RUN_TRANSITIONS } from '@/lib/fleet/run';
import { allSteps } from '@/lib/fleet/transitions';
import { acknowledgeNotes } from '@/lib/services/runs/acknowledge-notes';
import {
  addLot,
  cuts,
  type FloorWorld,
  openFloorWorld,
  prepare,
  TestJournal,
} from '@/tests/support/floor-world';

let floor: FloorWorld;
let run: Awaited<ReturnType<typeof prepare>>;

beforeAll(async () => {
  floor = await openFloorWorld();
  run = await prepare(floor, floor.rigIds[0] ?? '', 5);
  const { actor, ...ctx } = await floor.as('operator');
  const ids = { rigId: run.rigId, runId: run.runId };
  await new TestJournal(floor).tell(
    { kind: 'run-started', ...ids, personId: actor.personId, commandId: randomUUID() },
    ...cuts(run, 1, 2),
    { kind: 'misfeed', ...ids, piece: 3, cause: 'jammed', foundBy: 'rig', personId: null },
  );
  await acknowledgeNotes({
    ctx: { ...ctx, actor },
    input: { runId: run.runId, notesVersion: 1, full: true },
  });
  await floor.world.query(
    `insert into piece_entries (run_id, kind, pieces, reason, at) values ($1, 'scrap', 1, 'short', now())`,
    [run.runId],
  );
  await floor.world.query(
    `insert into measurements (run_id, piece, length_mm, within_tolerance, person_id, at)
     values ($1, 1, 120, true, $2, now())`,
    [run.runId, actor.personId],
  );
  await floor.world.query(
    `insert into bags (run_id, code, pieces, cleared_by, cleared_at) values ($1, 'EW-T', 1, $2, now())`,
    [run.runId, actor.personId],
  );
});
afterAll(() => floor.close());

const HISTORY = [
  ['events', 'kind'],
  ['acknowledgements', 'at'],
  ['piece_entries', 'pieces'],
  ['measurements', 'length_mm'],
  ['misfeeds', 'piece'],
  ['bags', 'pieces'],
  ['profiles', 'version'],
  ['interlock_notes', 'version'],
  ['audit_entries', 'verb'],
] as const;

describe('law 10: history is not rewritten', () => {
  it.each(HISTORY)('%s refuse to be changed, deleted and emptied', async (table, column) => {
    const [rows] = await floor.world.query<{ rows: number }>(`select count(*)::int as rows from ${table}`);
    expect(rows?.rows).toBeGreaterThan(0);
    const refused = expect.objectContaining({ code: 'EW002' }) as unknown;
    await expect(floor.world.query(`update ${table} set ${column} = ${column}`)).rejects.toEqual(refused);
    await expect(floor.world.query(`delete from ${table}`)).rejects.toEqual(refused);
    await expect(floor.world.query(`truncate ${table} cascade`)).rejects.toEqual(refused);
  });
});

describe('the steps of lots and runs', () => {
  it.each([
    ['lots', allSteps(LOT_TRANSITIONS)],
    ['runs', allSteps(RUN_TRANSITIONS)],
  ])('of %s are the same in the database as in the house', async (machine, steps) => {
    const kept = await floor.world.query<{ from: string; to: string }>(
      'select from_state as from, to_state as to from state_steps where machine = $1',
      [machine],
    );
    const inOrder = (list: { from: string; to: string }[]) =>
      list.map(({ from, to }) => `${from} > ${to}`).toSorted();
    expect(inOrder(kept)).toEqual(inOrder(steps));
  });

  it('that are illegal are refused by the database, whoever asks', async () => {
    const refused = expect.objectContaining({ code: 'EW001' }) as unknown;
    const step = (state: string) =>
      floor.world.query('update runs set state = $2 where id = $1', [run.runId, state]);
    for (const state of ['prepared', 'cleared', 'dropped', 'nonsense'])
      await expect(step(state)).rejects.toEqual(refused);
    const { lotId } = await addLot(floor, { pieces: 3 });
    await expect(floor.world.query("update lots set state = 'cut' where id = $1", [lotId])).rejects.toEqual(
      refused,
    );
  });

  it('begin at the beginning: a lot that is born cut is refused', async () => {
    await expect(
      floor.world.query(
        `insert into lots (line_id, number, pieces, state, rig_id, queued_at) values ($1, 9, 1, 'cut', $2, now())`,
        [run.lineId, run.rigId],
      ),
    ).rejects.toEqual(expect.objectContaining({ code: 'EW001' }));
  });

  it('keep the sum: lots that do not add up to their line are refused at the commit', async () => {
    const { lotId } = await addLot(floor, { pieces: 3 });
    await expect(floor.world.query('update lots set pieces = 2 where id = $1', [lotId])).rejects.toEqual(
      expect.objectContaining({ code: 'EW003' }),
    );
  });
});
