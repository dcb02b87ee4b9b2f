import { readFile, rm, writeFile } from 'node:fs/promises';
import { describe, expect, it } from 'vitest';
import type { EventSource } from '@/agent/journal/contract';
import { makeFolder, newestSegment, NOON, openAt, plain, said } from './journal-support';

/** Flips one bit of the byte at which `text` begins in the newest segment. */
async function flipAt(dir: string, text: string): Promise<string> {
  const { path } = await newestSegment(dir);
  const bytes = await readFile(path);
  const position = bytes.indexOf(text);
  if (position === -1) throw new Error(`${text} is not in the journal`);
  bytes.writeUInt8(bytes.readUInt8(position) ^ 1, position);
  await writeFile(path, bytes);
  return path;
}

async function allOf(source: EventSource): Promise<string[]> {
  const events = await source.eventsFrom(source.acknowledged + 1, 500);
  return plain(events.map((event) => ({ type: 'event', event })));
}

/** Five events and two notes, the first two events acknowledged. */
async function written(dir: string): Promise<string> {
  const { journal } = await openAt(dir);
  for (const number of [1, 2, 3]) await journal.appendEvent(said(number), NOON);
  await journal.appendNote({ note: 'mark', value: 100 });
  for (const number of [4, 5]) await journal.appendEvent(said(number), NOON);
  await journal.appendNote({ note: 'mark', value: 101 });
  await journal.acknowledge(2);
  await journal.close();
  return journal.id;
}

describe('a damaged journal', () => {
  it('is reported with file and place, and left as it is', async () => {
    const dir = await makeFolder();
    await written(dir);
    const path = await flipAt(dir, 'line 4');
    const before = await readFile(path);
    const { journal, damaged, told } = await openAt(dir);
    expect(damaged).toBe(true);
    expect(told.map((damage) => damage.kind)).toEqual(['unreadable', 'events-missing']);
    expect(told[0]?.path).toBe(path);
    expect(before.subarray(told[0]?.offset).toString()).toContain('"sequence":4');
    await journal.close();
    expect(await readFile(path)).toEqual(before);
  });

  it('goes on under a new id: events before the gap go up under the old one, those behind it under the new', async () => {
    const dir = await makeFolder();
    const oldId = await written(dir);
    await flipAt(dir, 'line 4');
    const { journal, history } = await openAt(dir);
    expect(plain(history)).toEqual([
      'event 1: line 1',
      'event 2: line 2',
      'event 3: line 3',
      'mark 100',
      'event 1: line 5',
      'mark 101',
    ]);
    expect(journal.id).not.toBe(oldId);
    expect(journal.earlier.map((source) => source.id)).toEqual([oldId]);
    for (const source of journal.earlier) expect(await allOf(source)).toEqual(['event 3: line 3']);
    expect(await allOf(journal)).toEqual(['event 1: line 5']);
    expect(await journal.appendEvent(said(6), NOON)).toBe(2);
    await journal.close();
  });

  it('loses no event when only a note was damaged', async () => {
    const dir = await makeFolder();
    await written(dir);
    await flipAt(dir, '"value":100');
    const { journal, damaged, told } = await openAt(dir);
    expect(damaged).toBe(true);
    expect(told.map((damage) => damage.kind)).toEqual(['unreadable']);
    for (const source of journal.earlier) {
      expect(await allOf(source)).toEqual(['event 3: line 3', 'event 4: line 4', 'event 5: line 5']);
    }
    expect(journal.lastSequence).toBe(0);
    await journal.close();
  });

  it('is told again at every opening until the core has settled it, and the history stays known', async () => {
    const dir = await makeFolder();
    await written(dir);
    await flipAt(dir, 'line 4');
    const first = await openAt(dir);
    await first.journal.appendEvent(said(6), NOON);
    await first.journal.close();

    const second = await openAt(dir);
    expect(second.damaged).toBe(true);
    expect(second.told).toEqual([]);
    expect(second.journal.id).toBe(first.journal.id);
    expect(plain(second.history)).toEqual([...plain(first.history), 'event 2: line 6']);
    await second.journal.settleDamage();
    await second.journal.close();

    const third = await openAt(dir);
    expect(third.damaged).toBe(false);
    expect(plain(third.history)).toEqual(plain(second.history));
    for (const source of third.journal.earlier) await source.acknowledge(3);
    await third.journal.close();
    const fourth = await openAt(dir);
    expect(fourth.journal.earlier).toEqual([]);
    await fourth.journal.close();
  });

  it('is noticed when its last record was altered though nothing follows it', async () => {
    const dir = await makeFolder();
    await written(dir);
    await flipAt(dir, '"value":101');
    const { journal, damaged } = await openAt(dir);
    expect(damaged).toBe(true);
    await journal.close();
  });

  it('is noticed when it ends before what the server has stored', async () => {
    const dir = await makeFolder();
    const { journal } = await openAt(dir);
    const { path } = await newestSegment(dir);
    const early = await readFile(path);
    for (const number of [1, 2]) await journal.appendEvent(said(number), NOON);
    await journal.acknowledge(2);
    await journal.close();
    await writeFile(path, early);
    const again = await openAt(dir);
    expect(again.told.map((damage) => damage.kind)).toEqual(['end-missing']);
    expect(again.journal.id).not.toBe(journal.id);
    await again.journal.close();
  });

  it('is noticed when a whole segment is gone', async () => {
    const dir = await makeFolder();
    const { journal } = await openAt(dir, { segmentBytes: 300 });
    const { path } = await newestSegment(dir);
    for (const number of [1, 2, 3, 4, 5]) await journal.appendEvent(said(number), NOON);
    await journal.close();
    await rm(path);
    const again = await openAt(dir);
    expect(again.damaged).toBe(true);
    expect(again.told.map((damage) => damage.kind)).toContain('segment-missing');
    await again.journal.close();
  });

  it('sends an unreadable acknowledgement’s events up once more rather than none', async () => {
    const dir = await makeFolder();
    await written(dir);
    const { path } = await newestSegment(dir);
    await writeFile(path.replace(/segment-\d+$/, 'acknowledged'), '');
    const { journal, damaged } = await openAt(dir);
    expect(damaged).toBe(false);
    expect(journal.acknowledged).toBe(0);
    await journal.close();
  });
});
