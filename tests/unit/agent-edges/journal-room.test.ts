import { open, readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { CommitQueue } from '@/agent/journal/commit-queue';
import type { OpenSegment } from '@/agent/journal/segment-files';
import { makeFolder, newestSegment, NOON, openAt, plain, said } from './journal-support';

async function segmentsIn(dir: string): Promise<string[]> {
  const { path } = await newestSegment(dir);
  return (await readdir(join(path, '..'))).filter((name) => name.startsWith('segment-')).sort();
}

describe('the room a journal takes', () => {
  it('removes a segment only when its events are acknowledged and a later snapshot tells the state', async () => {
    const dir = await makeFolder();
    const { journal } = await openAt(dir, { segmentBytes: 400 });
    for (const number of [1, 2, 3, 4, 5, 6]) await journal.appendEvent(said(number), NOON);
    const full = await segmentsIn(dir);
    expect(full.length).toBeGreaterThan(2);
    expect(journal.wantsSnapshot).toBe(true);
    await journal.acknowledge(5);
    expect(await segmentsIn(dir)).toEqual(full);

    await journal.appendNote({ note: 'snapshot', value: 6 });
    expect(journal.wantsSnapshot).toBe(false);
    await journal.acknowledge(6);
    const left = await segmentsIn(dir);
    expect(left.length).toBeLessThan(full.length);
    await journal.close();

    const again = await openAt(dir, { segmentBytes: 400 });
    expect(again.damaged).toBe(false);
    expect(plain(again.history)).toEqual(['snapshot 6']);
    expect(again.journal.acknowledged).toBe(6);
    expect(await again.journal.appendEvent(said(7), NOON)).toBe(7);
    await again.journal.close();
  });

  it('keeps unacknowledged events on disk beyond any snapshot', async () => {
    const dir = await makeFolder();
    const { journal } = await openAt(dir, { segmentBytes: 400 });
    for (const number of [1, 2, 3, 4, 5, 6]) await journal.appendEvent(said(number), NOON);
    await journal.appendNote({ note: 'snapshot', value: 6 });
    await journal.acknowledge(1);
    await journal.close();
    const again = await openAt(dir, { segmentBytes: 400 });
    const found: number[] = [];
    for (let next = 2; next <= 6; next = (found.at(-1) ?? 6) + 1) {
      found.push(...(await again.journal.eventsFrom(next, 500)).map((event) => event.sequence));
    }
    expect(found).toEqual([2, 3, 4, 5, 6]);
    expect(plain(again.history)).toEqual(['snapshot 6']);
    await again.journal.close();
  });

  it('calls itself full at its bound and still takes what happens', async () => {
    const { journal } = await openAt(await makeFolder(), { segmentBytes: 600, boundBytes: 1500 });
    expect(journal.full).toBe(false);
    for (let number = 1; number <= 12; number += 1) await journal.appendEvent(said(number), NOON);
    expect(journal.full).toBe(true);
    expect(await journal.appendEvent(said(13), NOON)).toBe(13);
    await journal.appendNote({ note: 'snapshot', value: 13 });
    await journal.acknowledge(13);
    expect(journal.full).toBe(false);
    await journal.close();
  });
});

/** A real file whose disk refuses: `refusals` says which writes and syncs fail, in turn. */
async function refusingSegment(path: string, refusals: (null | { at: 'write' | 'sync'; code: string })[]) {
  const handle = await open(path, 'w+');
  const fail = (code: string) => Object.assign(new Error(code), { code });
  const segment: OpenSegment = {
    number: 1,
    path,
    sizeBytes: 0,
    handle: {
      async write(bytes, offset, length, position) {
        if (refusals[0]?.at !== 'write') return handle.write(bytes, offset, length, position);
        await handle.write(bytes, offset, Math.floor(length / 2), position);
        throw fail(refusals.shift()?.code ?? '');
      },
      async datasync() {
        const refusal = refusals.shift();
        if (refusal) throw fail(refusal.code);
        await handle.datasync();
      },
      truncate: (length) => handle.truncate(length),
      close: () => handle.close(),
    },
  };
  return segment;
}

function push(queue: CommitQueue, text: string): Promise<number> {
  return new Promise((resolve, reject) => {
    const committed = (_segment: OpenSegment, offset: number) => resolve(offset);
    queue.push({ line: Buffer.from(`${text}\n`), committed, failed: reject });
  });
}

describe('a disk without room', () => {
  it.each(['write', 'sync'] as const)(
    'is waited for at a %s: the append resolves once it is durable, half a line is taken back',
    async (at) => {
      const path = join(await makeFolder(), 'segment');
      const segment = await refusingSegment(path, [null, { at, code: 'ENOSPC' }]);
      const queue = new CommitQueue({ segment: async () => segment, afterCommit: () => undefined });
      expect(await push(queue, 'first')).toBe(0);
      const second = push(queue, 'second');
      const third = push(queue, 'third');
      expect(await Promise.all([second, third])).toEqual([6, 13]);
      expect(queue.outOfRoom).toBe(false);
      expect(await readFile(path, 'utf8')).toBe('first\nsecond\nthird\n');
      await queue.close();
      await segment.handle.close();
    },
  );

  it('does not keep a stopping agent: what waits for room is given up, and says so', async () => {
    const path = join(await makeFolder(), 'segment');
    const always = Array.from({ length: 100 }, () => ({ at: 'write', code: 'ENOSPC' }) as const);
    const segment = await refusingSegment(path, always);
    const queue = new CommitQueue({ segment: async () => segment, afterCommit: () => undefined });
    const waiting = push(queue, 'first');
    await Promise.all([queue.close(), expect(waiting).rejects.toMatchObject({ code: 'journal-closed' })]);
    expect(await readFile(path, 'utf8')).toBe('');
    await segment.handle.close();
  });

  it('is another thing than a broken disk, after which nothing is taken until a new start', async () => {
    const path = join(await makeFolder(), 'segment');
    const segment = await refusingSegment(path, [{ at: 'sync', code: 'EIO' }]);
    const queue = new CommitQueue({ segment: async () => segment, afterCommit: () => undefined });
    await expect(push(queue, 'first')).rejects.toMatchObject({ code: 'journal-failed' });
    await expect(push(queue, 'second')).rejects.toMatchObject({ code: 'journal-failed' });
    await segment.handle.close();
  });
});
