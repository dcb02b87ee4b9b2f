import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { EventBody } from '@/lib/protocol/events';
import {
  cuts,
  errorCode,
  type FloorWorld,
  openFloorWorld,
  prepare,
  runRow,
  standingAlarms,
  TestJournal,
} from '@/tests/support/floor-world';

let floor: FloorWorld;
let rigs: string[];
let run: { rigId: string; runId: string };
const PERSON = randomUUID();

beforeAll(async () => {
  floor = await openFloorWorld({ rigs: 8 });
  rigs = [...floor.rigIds];
});
afterAll(() => floor.close());

/** A run of `pieces` on the next rig that had none. */
async function nextRun(pieces = 10) {
  const rigId = rigs.shift();
  if (!rigId) throw new Error('More rigs are needed');
  run = await prepare(floor, rigId, pieces);
  return run;
}

const started = (): EventBody => ({ kind: 'run-started', ...run, personId: PERSON, commandId: randomUUID() });
const stored = async (journal: TestJournal) => {
  const [row] = await floor.world.query<{ events: number }>(
    'select count(*)::int as events from events where journal_id = $1',
    [journal.journalId],
  );
  return row?.events;
};

describe('law 1: a piece is counted once, and only when the rig says it was cut', () => {
  it('counts from piece-cut alone: a start, a trim and a hold count nothing', async () => {
    await nextRun();
    const journal = new TestJournal(floor);
    await journal.tell(
      started(),
      { kind: 'trim-cut', ...run, wireMm: 15 },
      { kind: 'run-held', ...run, reason: 'misfeed', note: '' },
    );
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 0, trims: 1, state: 'held' });
    await journal.tell(...cuts(run, 1, 1));
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 1, trims: 1, wire: 135 });
  });

  it('counts a batch of events that comes twice once, in pieces, wire, spool and blade', async () => {
    await nextRun();
    const journal = new TestJournal(floor);
    const events = journal.number(started(), ...cuts(run, 1, 4));
    expect(await journal.upload(events)).toEqual({ storedThrough: 5 });
    expect(await journal.upload(events)).toEqual({ storedThrough: 5 });
    expect(await stored(journal)).toBe(5);
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 4, wire: 480 });
    const charged = await floor.world.query(
      `select s.used_mm::float8 as used, b.cuts from rigs g join spools s on s.id = g.spool_id
       join blades b on b.rig_id = g.id where g.id = $1`,
      [run.rigId],
    );
    expect(charged).toEqual([{ used: 480, cuts: 4 }]);
  });

  it('counts a batch that two uploads bring at the same moment once', async () => {
    await nextRun();
    const journal = new TestJournal(floor);
    const events = journal.number(started(), ...cuts(run, 1, 6));
    const answers = await Promise.all([1, 2, 3].map(() => journal.upload(events)));
    expect(answers).toEqual([{ storedThrough: 7 }, { storedThrough: 7 }, { storedThrough: 7 }]);
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 6, wire: 720 });
  });

  it('takes what is new of a batch that is a replay in part', async () => {
    await nextRun();
    const journal = new TestJournal(floor);
    const events = journal.number(started(), ...cuts(run, 1, 5));
    await journal.upload(events.slice(0, 4));
    expect(await journal.upload(events.slice(2))).toEqual({ storedThrough: 6 });
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 5, wire: 600 });
  });

  it('never counts above what the run asked for: that is surplus and an alarm', async () => {
    await nextRun(3);
    const journal = new TestJournal(floor);
    await journal.tell(started(), ...cuts(run, 1, 4));
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 3, surplus: 1 });
    expect(await standingAlarms(floor)).toContain('surplus pieces');
  });
});

describe('law 7: events go up in order, each once, and gaps are refused', () => {
  it('refuses a gap with the number it expects, and stores nothing of the batch', async () => {
    await nextRun();
    const journal = new TestJournal(floor);
    const events = journal.number(started(), ...cuts(run, 1, 5));
    await journal.upload(events.slice(0, 2));
    await expect(journal.upload(events.slice(3))).rejects.toMatchObject({
      code: 'journal-gap',
      details: { expected: 3 },
    });
    expect(await stored(journal)).toBe(2);
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 1 });
  });

  it('refuses a journal that does not begin with its first event', async () => {
    const journal = new TestJournal(floor);
    const [, second] = journal.number(...cuts(run, 1, 2));
    await expect(journal.upload(second ? [second] : [])).rejects.toMatchObject({
      code: 'journal-gap',
      details: { expected: 1 },
    });
  });

  it('refuses a batch in the wrong order, and one with a hole in it', async () => {
    const journal = new TestJournal(floor);
    const events = journal.number(...cuts(run, 1, 3));
    await expect(journal.upload(events.toReversed())).rejects.toEqual(errorCode('journal-gap'));
    await expect(journal.upload(events.filter((_, index) => index !== 1))).rejects.toMatchObject({
      code: 'journal-gap',
      details: { expected: 2 },
    });
    expect(await stored(journal)).toBe(0);
  });

  it('reports another content under a stored number as a conflict, raises an alarm and keeps the first', async () => {
    const journal = new TestJournal(floor);
    const [first] = journal.number({ kind: 'firmware-said', rigId: run.rigId, text: 'one' });
    if (!first) throw new Error('There is no event');
    await journal.upload([first]);
    const other = { ...first, body: { ...first.body, text: 'two' } as EventBody };
    await expect(journal.upload([other])).rejects.toMatchObject({
      code: 'event-conflict',
      details: { sequence: 1 },
    });
    expect(await standingAlarms(floor)).toContain('journal conflict');
    const kept = await floor.world.query("select body->>'text' as text from events where journal_id = $1", [
      journal.journalId,
    ]);
    expect(kept).toEqual([{ text: 'one' }]);
  });

  it('refuses a whole batch that names a rig of somebody else', async () => {
    const journal = new TestJournal(floor);
    const rigId = randomUUID();
    await expect(
      journal.tell(...cuts(run, 1, 1), { kind: 'firmware-said', rigId, text: 'hm' }),
    ).rejects.toMatchObject({ code: 'rig-not-bound', details: { rigId } });
    expect(await stored(journal)).toBe(0);
  });
});

describe('law 3: an open piece is said, not guessed', () => {
  const doubted = (piece: number): EventBody => ({ kind: 'piece-doubted', ...run, piece, wireMm: 120 });
  const settled = (piece: number, answer: 'count' | 'discard'): EventBody => ({
    kind: 'piece-settled',
    ...run,
    piece,
    answer,
    personId: PERSON,
  });

  it('counts a doubted piece when a person counts it, and not before', async () => {
    await nextRun();
    const journal = new TestJournal(floor);
    const held: EventBody = { kind: 'run-held', ...run, reason: 'doubt', note: '' };
    await journal.tell(started(), ...cuts(run, 1, 2), doubted(3), held);
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 2, doubt: 3, state: 'held' });
    expect(await standingAlarms(floor)).toContain('piece in doubt');
    await journal.tell(settled(3, 'count'));
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 3, doubt: null });
    expect(await standingAlarms(floor)).not.toContain('piece in doubt');
  });

  it('leaves a discarded piece out, so that its number is cut again and counts once', async () => {
    await nextRun();
    const journal = new TestJournal(floor);
    await journal.tell(started(), ...cuts(run, 1, 2), doubted(3), settled(3, 'discard'));
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 2, doubt: null });
    await journal.tell(...cuts(run, 3, 3));
    expect(await runRow(floor, run.runId)).toMatchObject({ cut: 3, wire: 480 });
  });
});
