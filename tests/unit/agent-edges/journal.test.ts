import { readFile, truncate, writeFile } from 'node:fs/promises';
import { describe, expect, it } from 'vitest';
import { afterKill, makeFolder, newestSegment, NOON, openAt, plain, RIG, said } from './journal-support';

describe('the journal of an agent', () => {
  it('gives back events and notes in the order of writing, events numbered from 1 without gaps', async () => {
    const dir = await makeFolder();
    const { journal, history, damaged } = await openAt(dir);
    expect(history).toEqual([]);
    expect(damaged).toBe(false);
    const order = await Promise.all([
      journal.appendEvent(said(1), NOON),
      journal.appendNote({ note: 'mark', value: 7 }),
      journal.appendEvent(said(2), NOON),
    ]);
    expect(order).toEqual([1, undefined, 2]);
    await journal.close();

    const again = await openAt(dir);
    expect(again.journal.id).toBe(journal.id);
    expect(plain(again.history)).toEqual(['event 1: line 1', 'mark 7', 'event 2: line 2']);
    expect(again.journal.lastSequence).toBe(2);
    expect(await again.journal.appendEvent(said(3), NOON)).toBe(3);
    await again.journal.close();
  });

  it('has every resolved append on disk when the process is killed right after', async () => {
    const { journal } = await openAt(await makeFolder());
    const dir = await makeFolder();
    const live = await openAt(dir);
    await live.journal.appendEvent(said(1), NOON);
    const killed = await afterKill(dir);
    const again = await openAt(killed);
    expect(plain(again.history)).toEqual(['event 1: line 1']);
    await Promise.all([journal.close(), live.journal.close(), again.journal.close()]);
  });

  it('cuts off a torn last record and takes the next one in its place', async () => {
    const dir = await makeFolder();
    const { journal } = await openAt(dir);
    await journal.appendEvent(said(1), NOON);
    await journal.appendEvent(said(2), NOON);
    await journal.close();
    const { path, sizeBytes } = await newestSegment(dir);
    await truncate(path, sizeBytes - 1);

    const again = await openAt(dir);
    expect(again.damaged).toBe(false);
    expect(again.told).toEqual([]);
    expect(plain(again.history)).toEqual(['event 1: line 1']);
    expect(await again.journal.appendEvent(said(9), NOON)).toBe(2);
    await again.journal.close();
    const third = await openAt(dir);
    expect(plain(third.history)).toEqual(['event 1: line 1', 'event 2: line 9']);
    await third.journal.close();
  });

  it('cuts off blocks of zeros that a power loss leaves behind the last record', async () => {
    const dir = await makeFolder();
    const { journal } = await openAt(dir);
    await journal.appendEvent(said(1), NOON);
    await journal.close();
    const { path } = await newestSegment(dir);
    const tail = Buffer.concat([Buffer.alloc(300), Buffer.from('half a record"}\n')]);
    await writeFile(path, Buffer.concat([await readFile(path), tail]));
    const again = await openAt(dir);
    expect(again.damaged).toBe(false);
    expect(plain(again.history)).toEqual(['event 1: line 1']);
    await again.journal.close();
  });

  it('refuses a body that the server would refuse, and gives its number to the next event', async () => {
    const { journal } = await openAt(await makeFolder());
    const tooLong = { kind: 'firmware-said', rigId: RIG, text: 'x'.repeat(301) } as const;
    await expect(journal.appendEvent(tooLong, NOON)).rejects.toThrow();
    expect(await journal.appendEvent(said(1), NOON)).toBe(1);
    await journal.close();
  });

  it('syncs many waiting appends together and tells listeners once they are durable', async () => {
    const { journal } = await openAt(await makeFolder());
    let told = 0;
    const stop = journal.onAppend(() => (told += 1));
    await Promise.all(Array.from({ length: 200 }, (_, index) => journal.appendEvent(said(index), NOON)));
    expect(journal.lastSequence).toBe(200);
    expect(told).toBeGreaterThan(0);
    expect(told).toBeLessThan(20);
    stop();
    const before = told;
    await journal.appendNote({ note: 'mark', value: 1 });
    await journal.appendEvent(said(201), NOON);
    expect(told).toBe(before);
    await journal.close();
  });

  it('starts under a new id when its folder was lost', async () => {
    const first = await openAt(await makeFolder());
    const second = await openAt(await makeFolder());
    expect(second.journal.id).not.toBe(first.journal.id);
    expect(second.journal.lastSequence).toBe(0);
    await Promise.all([first.journal.close(), second.journal.close()]);
  });

  it('takes nothing after it was closed, and finishes what was being written', async () => {
    const dir = await makeFolder();
    const { journal } = await openAt(dir);
    const writing = journal.appendEvent(said(1), NOON);
    const closing = journal.close();
    await expect(journal.appendEvent(said(2), NOON)).rejects.toMatchObject({ code: 'journal-closed' });
    expect(await writing).toBe(1);
    await closing;
    const again = await openAt(dir);
    expect(plain(again.history)).toEqual(['event 1: line 1']);
    await again.journal.close();
  });

  it('finds any stretch of its events, from memory and from disk, over segments', async () => {
    const dir = await makeFolder();
    const { journal } = await openAt(dir, { segmentBytes: 40_000 });
    await Promise.all(Array.from({ length: 3000 }, (_, index) => journal.appendEvent(said(index + 1), NOON)));
    for (const [from, limit] of [
      [1, 1],
      [127, 5],
      [128, 500],
      [1900, 500],
      [2999, 500],
      [3001, 10],
    ] as const) {
      const wanted = Array.from({ length: Math.max(0, Math.min(limit, 3001 - from)) }, (_, i) => from + i);
      const found: number[] = [];
      while (found.length < wanted.length) {
        const part = await journal.eventsFrom(from + found.length, limit - found.length);
        if (part.length === 0) break;
        found.push(...part.map((event) => event.sequence));
      }
      expect(found).toEqual(wanted);
    }
    await journal.close();
    const again = await openAt(dir, { segmentBytes: 40_000 });
    const [event] = await again.journal.eventsFrom(1234, 1);
    expect(event?.body).toEqual(said(1234));
    await again.journal.close();
  });
});
