import { randomUUID } from 'node:crypto';
import { afterAll, beforeEach, describe, expect, it } from 'vitest';
import type { BatchDto } from '@/lib/schemas/batches';
import { changeBatch } from '@/lib/services/batches/change-batch';
import { createBatch } from '@/lib/services/batches/create-batch';
import { duplicateBatch } from '@/lib/services/batches/duplicate-batch';
import { queueBatch } from '@/lib/services/batches/queue-batch';
import { readBatch } from '@/lib/services/batches/read-batch';
import { withdrawBatch } from '@/lib/services/batches/withdraw-batch';
import { giveLots } from '@/lib/services/dispatch/give-lots';
import { hearRigs, lineOf, makeBatch } from '@/tests/support/batch-world';
import { cuts, errorCode, type FloorWorld, openFloorWorld, TestJournal } from '@/tests/support/floor-world';

let floor: FloorWorld;
const opened: FloorWorld[] = [];
beforeEach(async () => {
  floor = await openFloorWorld({ rigs: 2 });
  opened.push(floor);
});
afterAll(() => Promise.all(opened.map((one) => one.close())));

async function read(batchId: string): Promise<BatchDto> {
  return readBatch({ ctx: await floor.as('operator'), input: { batchId } });
}

/** The change that a form sends of a batch it has read. */
function asChange(batch: BatchDto) {
  const { id: batchId, revision, name, dueAt, priority } = batch;
  const lines = batch.lineList.map(
    ({ id, label, wire, lengthMm, toleranceMinusMm, tolerancePlusMm, pieces }) => {
      return {
        id: id as string | null,
        label,
        wireId: wire.id,
        lengthMm,
        toleranceMinusMm,
        tolerancePlusMm,
        pieces,
      };
    },
  );
  return { batchId, revision, name, dueAt, priority, lines };
}

async function change(batch: BatchDto, make: (change: ReturnType<typeof asChange>) => void): Promise<void> {
  const input = asChange(batch);
  make(input);
  await changeBatch({ ctx: await floor.as('scheduler'), input });
}

/** A queued batch of 50 pieces in lots of 20, whose first lot is cut through piece 7. */
async function halfCut() {
  await floor.world.query('update workshop set lot_pieces_most = 20');
  await hearRigs(floor, floor.rigIds.slice(0, 1));
  const batchId = await makeBatch(floor, [lineOf(floor, { pieces: 50 })]);
  await giveLots({ ctx: floor.system() });
  const given = (await read(batchId)).lineList[0]?.lots.find(({ state }) => state === 'given');
  const run = { rigId: given?.rigId ?? '', runId: given?.runId ?? '' };
  const { actor } = await floor.as('operator');
  const started = { kind: 'run-started' as const, ...run, personId: actor.personId, commandId: randomUUID() };
  await new TestJournal(floor).tell(started, ...cuts(run, 1, 7));
  return { batchId, run };
}

const sizes = (batch: BatchDto) =>
  batch.lineList.map(({ lots }) => lots.map(({ number, pieces, state }) => [number, pieces, state]));

describe('a batch made by hand', () => {
  it('is a draft without lots until it is queued, then even lots that wait', async () => {
    const batchId = await makeBatch(floor, [lineOf(floor, { pieces: 1000 })], { queue: false });
    expect(await read(batchId)).toMatchObject({ state: 'draft', pieces: 1000, lines: 1, revision: 1 });
    await queueBatch({ ctx: await floor.as('scheduler'), input: { batchId } });
    const batch = await read(batchId);
    expect(batch.state).toBe('queued');
    expect(sizes(batch)).toEqual([
      [
        [1, 334, 'waiting'],
        [2, 333, 'waiting'],
        [3, 333, 'waiting'],
      ],
    ]);
    const again = queueBatch({ ctx: await floor.as('scheduler'), input: { batchId } });
    await expect(again).rejects.toEqual(errorCode('illegal-step'));
  });

  it('is split so that no lot needs more wire than a full spool has', async () => {
    const batchId = await makeBatch(floor, [lineOf(floor, { pieces: 300, lengthMm: 500 })]);
    expect(sizes(await read(batchId))).toEqual([
      [
        [1, 150, 'waiting'],
        [2, 150, 'waiting'],
      ],
    ]);
  });

  it('writes what it causes in its own transaction', async () => {
    await makeBatch(floor, [lineOf(floor)]);
    const rows = await floor.world.query(
      "select payload from outbox where payload->>'because' = 'batch queued'",
    );
    expect(rows).toHaveLength(1);
  });

  it.each(['operator', 'maintainer'] as const)('is refused to a person who is only %s', async (role) => {
    const ctx = await floor.as(role);
    const input = { name: 'x', dueAt: null, priority: 3, queue: false, lines: [lineOf(floor)] };
    await expect(createBatch({ ctx, input })).rejects.toEqual(errorCode('not-allowed'));
  });

  it('names each line whose wire is unknown', async () => {
    const unknown = '00000000-0000-4000-8000-000000000000';
    const made = makeBatch(floor, [lineOf(floor), lineOf(floor, { wireId: unknown })]);
    await expect(made).rejects.toMatchObject({ code: 'bad-input', fields: [{ path: 'lines.1.wireId' }] });
  });

  it('that is duplicated becomes a draft with the same lines', async () => {
    const batchId = await makeBatch(floor, [lineOf(floor), lineOf(floor, { label: 'B2', lengthMm: 64.5 })]);
    const copy = await duplicateBatch({ ctx: await floor.as('scheduler'), input: { batchId } });
    const lines = (await read(copy.batchId)).lineList;
    expect(lines.map(({ label, lengthMm, pieces }) => [label, lengthMm, pieces])).toEqual([
      ['A1', 100, 20],
      ['B2', 64.5, 20],
    ]);
    expect(await read(copy.batchId)).toMatchObject({ state: 'draft', name: 'Panel loom, again' });
  });
});

describe('changing a batch', () => {
  it('keeps what is on a rig or cut, and splits the rest anew', async () => {
    const { batchId } = await halfCut();
    const before = await read(batchId);
    expect(before).toMatchObject({ state: 'cutting', cut: 7, pieces: 50 });
    expect(sizes(before)).toEqual([
      [
        [1, 17, 'running'],
        [2, 17, 'waiting'],
        [3, 16, 'waiting'],
      ],
    ]);
    await change(before, ({ lines }) => Object.assign(lines[0] ?? {}, { pieces: 90 }));
    expect(sizes(await read(batchId))).toEqual([
      [
        [1, 17, 'running'],
        [2, 19, 'waiting'],
        [3, 18, 'waiting'],
        [4, 18, 'waiting'],
        [5, 18, 'waiting'],
      ],
    ]);
    await change(await read(batchId), ({ lines }) => Object.assign(lines[0] ?? {}, { pieces: 17 }));
    expect(sizes(await read(batchId))).toEqual([[[1, 17, 'running']]]);
    expect(await read(batchId)).toMatchObject({ revision: 3, pieces: 17, cut: 7 });
  });

  it('refuses fewer pieces than are cut or on a rig, another length, and to take the line out', async () => {
    const { batchId } = await halfCut();
    const batch = await read(batchId);
    const fewer = change(batch, ({ lines }) => Object.assign(lines[0] ?? {}, { pieces: 16, lengthMm: 99 }));
    await expect(fewer).rejects.toMatchObject({
      code: 'bad-input',
      fields: [
        { path: 'lines.0.lengthMm' },
        { path: 'lines.0.pieces', message: '17 pieces of this line are cut or on a rig. Write at least 17.' },
      ],
    });
    const gone = change(batch, ({ lines }) => Object.assign(lines[0] ?? {}, { id: null }));
    await expect(gone).rejects.toMatchObject({ code: 'bad-input', fields: [{ path: 'lines' }] });
    expect(sizes(await read(batchId))).toEqual(sizes(batch));
  });

  it('moves, adds and takes out lines that are not begun', async () => {
    const labelled = ['A1', 'A2', 'A3'].map((label) => lineOf(floor, { label }));
    const batchId = await makeBatch(floor, labelled);
    await change(await read(batchId), ({ lines }) => {
      const [first, , third] = lines;
      if (!first || !third) throw new Error('lines are missing');
      lines.splice(
        0,
        3,
        third,
        { ...first, id: null, label: 'B1', pieces: 401 },
        { ...first, lengthMm: 222 },
      );
    });
    const batch = await read(batchId);
    expect(batch.lineList.map(({ label, lengthMm }) => [label, lengthMm])).toEqual([
      ['A3', 100],
      ['B1', 100],
      ['A1', 222],
    ]);
    expect(sizes(batch)).toEqual([
      [[1, 20, 'waiting']],
      [
        [1, 201, 'waiting'],
        [2, 200, 'waiting'],
      ],
      [[1, 20, 'waiting']],
    ]);
  });

  it('keeps the history of a line that was on a rig once', async () => {
    await hearRigs(floor, floor.rigIds.slice(0, 1));
    const batchId = await makeBatch(floor, [lineOf(floor), lineOf(floor, { label: 'B1' })]);
    const [gift] = await giveLots({ ctx: floor.system() });
    await floor.world.query("update runs set state = 'dropped'");
    await floor.world.query("update lots set state = 'waiting', rig_id = null where id = $1", [gift?.lotId]);
    await change(await read(batchId), ({ lines }) => lines.splice(0, 1));
    const batch = await read(batchId);
    expect(batch.lineList.map(({ label }) => label)).toEqual(['B1']);
    expect(batch).toMatchObject({ lines: 1, pieces: 20 });
    const [kept] = await floor.world.query('select state, pieces from lots where id = $1', [gift?.lotId]);
    expect(kept).toEqual({ state: 'withdrawn', pieces: 0 });
  });

  it('does not overwrite what somebody changed meanwhile', async () => {
    const batchId = await makeBatch(floor, [lineOf(floor)]);
    const seen = await read(batchId);
    await change(seen, (one) => Object.assign(one, { name: 'First' }));
    const second = change(seen, (one) => Object.assign(one, { name: 'Second' }));
    await expect(second).rejects.toEqual(errorCode('changed-meanwhile'));
    expect((await read(batchId)).name).toBe('First');
  });

  it('by two people at once lets one through', async () => {
    const batchId = await makeBatch(floor, [lineOf(floor)]);
    const seen = await read(batchId);
    const rename = (name: string) => change(seen, (one) => Object.assign(one, { name }));
    const settled = await Promise.allSettled([rename('First'), rename('Second')]);
    expect(settled.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
  });
});

describe('withdrawing a batch', () => {
  it('takes back what waits, lets the running lot finish, and says what is cut', async () => {
    const { batchId } = await halfCut();
    const answer = await withdrawBatch({ ctx: await floor.as('scheduler'), input: { batchId } });
    expect(answer).toEqual({
      withdrawnPieces: 33,
      cutPieces: 7,
      stillCutting: [{ rigName: 'Rig 1', pieces: 17, cut: 7 }],
    });
    const batch = await read(batchId);
    expect(batch).toMatchObject({ state: 'withdrawn', cut: 7 });
    expect(sizes(batch)).toEqual([
      [
        [1, 17, 'running'],
        [2, 17, 'withdrawn'],
        [3, 16, 'withdrawn'],
      ],
    ]);
    expect(await giveLots({ ctx: floor.system() })).toEqual([]);
    const again = withdrawBatch({ ctx: await floor.as('scheduler'), input: { batchId } });
    await expect(again).rejects.toEqual(errorCode('illegal-step'));
    const changed = change(batch, (one) => Object.assign(one, { name: 'x' }));
    await expect(changed).rejects.toEqual(errorCode('illegal-step'));
  });

  it('asks the rig for a lot that has not begun, and keeps it there until the agent gives it up (law 4)', async () => {
    await hearRigs(floor, floor.rigIds.slice(0, 1));
    const batchId = await makeBatch(floor, [lineOf(floor)]);
    await giveLots({ ctx: floor.system() });
    const answer = await withdrawBatch({ ctx: await floor.as('scheduler'), input: { batchId } });
    expect(answer).toEqual({ withdrawnPieces: 20, cutPieces: 0, stillCutting: [] });
    expect(sizes(await read(batchId))).toEqual([[[1, 20, 'given']]]);
    const asked = await floor.world.query("select kind from commands where kind = 'drop-program'");
    expect(asked).toHaveLength(1);
  });
});
