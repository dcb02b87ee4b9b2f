import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { bagCode } from '@/lib/fleet/bag-code';
import type { EventBody } from '@/lib/protocol/events';
import { readBag } from '@/lib/services/floor/read-bag';
import { readLabel } from '@/lib/services/floor/read-label';
import { readRun } from '@/lib/services/floor/read-run';
import { acknowledgeNotes } from '@/lib/services/runs/acknowledge-notes';
import { clearTray } from '@/lib/services/runs/clear-tray';
import { confirmBag } from '@/lib/services/runs/confirm-bag';
import { goOn } from '@/lib/services/runs/go-on';
import { measurePieces } from '@/lib/services/runs/measure-pieces';
import { scrapPieces } from '@/lib/services/runs/scrap-pieces';
import {
  cuts,
  errorCode,
  type FloorWorld,
  goodReport,
  openFloorWorld,
  prepare,
  report,
  runRow,
  standingAlarms,
  TestJournal,
} from '@/tests/support/floor-world';
import { startTestAgent, type TestAgent } from '@/tests/support/test-agent';

let floor: FloorWorld;
let agent: TestAgent;
let journal: TestJournal;
let rigs: string[];
let run: Awaited<ReturnType<typeof prepare>>;

beforeAll(async () => {
  floor = await openFloorWorld({ rigs: 6 });
  agent = await startTestAgent(floor);
  journal = new TestJournal(floor);
  rigs = [...floor.rigIds];
});
afterAll(async () => {
  await agent.close();
  await floor.close();
});

const of = () => ({ rigId: run.rigId, runId: run.runId });
const ended = (outcome: 'complete' | 'stopped', pieces: number): EventBody => ({
  kind: 'run-ended',
  ...of(),
  outcome,
  pieces,
  personId: null,
});

/** A run on the next rig that has cut so many pieces. */
async function cutting(pieces: number, cut: number) {
  run = await prepare(floor, rigs.shift() ?? '', pieces);
  const { actor } = await floor.as('operator');
  const ids = { personId: actor.personId, commandId: randomUUID() };
  await journal.tell({ kind: 'run-started', ...of(), ...ids }, ...cuts(run, 1, cut));
}
const held = (reason: 'first-pieces' | 'misfeed'): EventBody => ({
  kind: 'run-held',
  ...of(),
  reason,
  note: '',
});
const measure = async (lengths: [number, number][]) =>
  measurePieces({
    ctx: await floor.as('operator'),
    input: { runId: run.runId, lengths: lengths.map(([piece, lengthMm]) => ({ piece, lengthMm })) },
  });
const clear = async (scrapped = 0, sampled = 0) =>
  clearTray({ ctx: await floor.as('operator'), input: { runId: run.runId, scrapped, sampled } });
const scrap = async (kind: 'scrap' | 'sample' | 'doubt', pieces: number) =>
  scrapPieces({
    ctx: await floor.as('operator'),
    input: { runId: run.runId, kind, pieces, reason: 'looked at' },
  });
const read = async () => readRun({ ctx: await floor.as('scheduler'), input: { runId: run.runId } });
const lotsOfLine = () =>
  floor.world.query<{ number: number; pieces: number; state: string }>(
    'select number, pieces, state from lots where line_id = $1 order by number',
    [run.lineId],
  );

describe('first pieces', () => {
  it('ask for the lengths of exactly the pieces cut so far', async () => {
    await cutting(20, 5);
    await journal.tell(held('first-pieces'));
    expect((await read()).piecesToMeasure).toEqual([1, 2, 3, 4, 5]);
    expect(await standingAlarms(floor)).toContain('first pieces to measure');
    await expect(measure([[1, 120]])).rejects.toEqual(errorCode('bad-input'));
    await expect(measure([1, 2, 3, 4, 6].map((piece) => [piece, 120]))).rejects.toEqual(
      errorCode('bad-input'),
    );
  });

  it('scrap a piece that is a hair too short, and none that is at the very edge', async () => {
    await measure([
      [1, 120],
      [2, 123],
      [3, 119.999],
      [4, 121],
      [5, 122],
    ]);
    expect(await read()).toMatchObject({ piecesToMeasure: [], cut: 5, scrapped: 1, bagged: 4 });
    expect(await standingAlarms(floor)).not.toContain('first pieces to measure');
  });

  it('with a bad one among them are cut again: the rig is told to hold once more', async () => {
    const operator = await floor.as('operator');
    await acknowledgeNotes({ ctx: operator, input: { runId: run.runId, notesVersion: 1, full: true } });
    const [row] = await floor.world.query<{ sha: string }>(
      'select program_sha256 as sha from runs where id = $1',
      [run.runId],
    );
    await journal.tell({ kind: 'program-held', ...of(), programSha256: row?.sha ?? '' });
    await report(floor, goodReport(floor, run.rigId));
    await goOn({ ctx: operator, input: { runId: run.runId, presenceCode: '1234' } });
    expect(agent.taken.at(-1)).toMatchObject({ kind: 'go-on', firstPiecesAgain: true });
  });

  it('that were mistyped are entered again: both lengths stay, the scrap is taken back', async () => {
    await measure([[3, 120.1]]);
    expect(await read()).toMatchObject({ scrapped: 0, bagged: 5 });
    const kept = await floor.world.query(
      'select length_mm::float8 as mm from measurements where piece = 3 order by id',
    );
    expect(kept).toEqual([{ mm: 119.999 }, { mm: 120.1 }]);
    await report(floor, goodReport(floor, run.rigId));
    await goOn({ ctx: await floor.as('operator'), input: { runId: run.runId, presenceCode: '1234' } });
    expect(agent.taken.at(-1)).toMatchObject({ kind: 'go-on', firstPiecesAgain: false });
  });

  it('after another homing are the latest ones only', async () => {
    const { actor } = await floor.as('operator');
    const ids = { personId: actor.personId, commandId: randomUUID() };
    await journal.tell({ kind: 'run-went-on', ...of(), ...ids }, ...cuts(run, 6, 15), held('first-pieces'));
    expect((await read()).piecesToMeasure).toEqual([11, 12, 13, 14, 15]);
  });
});

describe('the count in the bag', () => {
  it('is pieces cut less scrap, samples and doubted ones, with corrections appended', async () => {
    await cutting(10, 10);
    await journal.tell(ended('complete', 10));
    expect(await standingAlarms(floor)).toContain('tray to clear');
    await scrap('scrap', 2);
    await scrap('scrap', -1);
    await scrap('sample', 1);
    await scrap('doubt', 1);
    expect(await read()).toMatchObject({ cut: 10, scrapped: 1, sampled: 1, doubted: 1, bagged: 7 });
    await expect(scrap('scrap', -2)).rejects.toEqual(errorCode('bad-input'));
    await expect(scrap('sample', 8)).rejects.toEqual(errorCode('bad-input'));
  });

  it('stands on the label, and the shortage goes back to the queue as a lot of its own', async () => {
    await clear(1, 0);
    const ctx = await floor.as('operator');
    const bag = await readBag({ ctx, input: { runId: run.runId } });
    expect(bag).toMatchObject({ pieces: 6, rigName: 'Rig 2', bladeLabel: 'B-2', spoolLabel: 'S-2' });
    expect(await readBag({ ctx, input: { code: bag.code.toLowerCase() } })).toEqual(bag);
    expect(await lotsOfLine()).toEqual([
      { number: 1, pieces: 6, state: 'bagged' },
      { number: 2, pieces: 4, state: 'waiting' },
    ]);
    expect(await runRow(floor, run.runId)).toMatchObject({ state: 'cleared' });
    expect(agent.taken.at(-1)).toMatchObject({ kind: 'clear-tray', runId: run.runId });
  });

  it('is written once: a cleared tray is not cleared again, and its pieces are not corrected', async () => {
    await expect(clear()).rejects.toEqual(errorCode('illegal-step'));
    await expect(scrap('scrap', 1)).rejects.toEqual(errorCode('illegal-step'));
  });

  it('is refused when more is thrown away than was cut, and nothing is kept of it', async () => {
    await cutting(10, 3);
    await journal.tell(ended('stopped', 3));
    await expect(clear(2, 2)).rejects.toEqual(errorCode('bad-input'));
    expect(await read()).toMatchObject({ state: 'ended', scrapped: 0, sampled: 0, bagged: 3 });
  });

  it('that is none makes no bag: the whole lot waits again', async () => {
    await clear(3, 0);
    expect(await lotsOfLine()).toEqual([{ number: 1, pieces: 10, state: 'waiting' }]);
    await expect(readBag({ ctx: await floor.as('operator'), input: { runId: run.runId } })).rejects.toEqual(
      errorCode('not-found'),
    );
  });

  it('of a batch that was withdrawn meanwhile leaves the shortage withdrawn', async () => {
    await cutting(10, 4);
    await floor.world.query('update batches set withdrawn_at = now() where id = $1', [run.batchId]);
    await journal.tell(ended('stopped', 4));
    await clear();
    expect(await lotsOfLine()).toEqual([
      { number: 1, pieces: 4, state: 'bagged' },
      { number: 2, pieces: 6, state: 'withdrawn' },
    ]);
  });

  it('is confirmed by scanning the code at the tray, and a second scan changes nothing', async () => {
    await cutting(5, 5);
    await journal.tell(ended('complete', 5));
    const [batch] = await floor.world.query<{ number: number }>('select number from batches where id = $1', [
      run.batchId,
    ]);
    const code = bagCode({
      batchNumber: batch?.number ?? 0,
      linePosition: 1,
      lotNumber: 1,
      runId: run.runId,
    });
    const ctx = await floor.as('operator');
    const printed = await readLabel({ ctx, input: { runId: run.runId } });
    expect(printed).toMatchObject({
      confirmed: false,
      bag: { code, pieces: 5, clearedByName: ctx.actor.name },
    });
    const bag = await confirmBag({ ctx, input: { code: ` ${code.toLowerCase()} ` } });
    expect(await readLabel({ ctx, input: { runId: run.runId } })).toEqual({ bag, confirmed: true });
    expect(bag).toMatchObject({ code, pieces: 5 });
    expect(await confirmBag({ ctx, input: { code } })).toEqual(bag);
    await expect(confirmBag({ ctx, input: { code: 'EW-1-1-1-ZZZZ' } })).rejects.toEqual(
      errorCode('not-found'),
    );
  });

  it('causes dispatch, for the rig is free', async () => {
    const [row] = await floor.world.query<{ because: string }>(
      "select payload->>'because' as because from outbox where topic = 'dispatch' order by id desc limit 1",
    );
    expect(row?.because).toBe('tray cleared');
  });
});
