import { readFile, rm, truncate } from 'node:fs/promises';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { afterKill, makeFolder, newestSegment, NOON, openAt, plain, said } from './journal-support';

type Append = 'event' | 'note';
interface Life {
  resolved: Append[];
  unresolved: Append[];
  /** Where between the last durable byte and the last written one the crash cuts, 0 to 1. */
  cut: number;
}

const appends = fc.array(fc.constantFrom<Append>('event', 'note'), { maxLength: 12 });
const life: fc.Arbitrary<Life> = fc.record({
  resolved: appends,
  unresolved: appends,
  cut: fc.double({ min: 0, max: 1, noNaN: true }),
});

/** Appends numbered records and gives the same as `plain` would say of them. */
async function appendAll(dir: string, kinds: readonly Append[], from: number, segmentBytes: number) {
  const { journal, history, damaged } = await openAt(dir, { segmentBytes });
  let sequence = journal.lastSequence;
  const written: string[] = [];
  const waiting: Promise<unknown>[] = [];
  for (const [index, kind] of kinds.entries()) {
    const number = from + index;
    if (kind === 'event') {
      sequence += 1;
      written.push(`event ${sequence}: line ${number}`);
      waiting.push(journal.appendEvent(said(number), NOON));
    } else {
      written.push(`mark ${number}`);
      waiting.push(journal.appendNote({ note: 'mark', value: number }));
    }
  }
  await Promise.all(waiting);
  await journal.close();
  return { written, history: plain(history), damaged };
}

describe('the journal after crashes', () => {
  it('keeps every resolved append and only a beginning of the others, whatever byte the crash cuts at', async () => {
    await fc.assert(
      fc.asyncProperty(fc.array(life, { minLength: 1, maxLength: 4 }), async (lives) => {
        const dir = await makeFolder();
        let known: string[] = [];
        let number = 1;
        for (const { resolved, unresolved, cut } of lives) {
          const first = await appendAll(dir, resolved, number, 1e9);
          expect(first).toMatchObject({ history: known, damaged: false });
          known = [...known, ...first.written];
          const durable = await newestSegment(dir);
          const second = await appendAll(dir, unresolved, number + resolved.length, 1e9);
          const written = await newestSegment(dir);
          const kept = durable.sizeBytes + Math.floor(cut * (written.sizeBytes - durable.sizeBytes));
          await truncate(written.path, kept);
          const { journal, history, damaged } = await openAt(dir);
          await journal.close();
          const found = plain(history);
          expect(damaged).toBe(false);
          expect(found.slice(0, known.length)).toEqual(known);
          expect(found.slice(known.length)).toEqual(second.written.slice(0, found.length - known.length));
          if (cut === 1) expect(found).toHaveLength(known.length + second.written.length);
          known = found;
          number += resolved.length + unresolved.length;
        }
        await rm(dir, { recursive: true });
      }),
      { numRuns: 30 },
    );
  }, 60_000);

  it('keeps a beginning of what was written when cut at any byte of any length, over segments', async () => {
    const dir = await makeFolder();
    const kinds = Array.from({ length: 14 }, (_, index): Append => (index % 3 === 2 ? 'note' : 'event'));
    const written: string[] = [];
    for (const [index, kind] of kinds.entries()) {
      written.push(...(await appendAll(dir, [kind], index + 1, 700)).written);
    }
    const { path, sizeBytes } = await newestSegment(dir);
    const headBytes = (await readFile(path)).indexOf('\n') + 1;
    for (let kept = 0; kept <= sizeBytes; kept += 1) {
      const killed = await afterKill(dir);
      await truncate((await newestSegment(killed)).path, kept);
      const { journal, history, damaged } = await openAt(killed);
      await journal.close();
      const found = plain(history);
      expect(found).toEqual(written.slice(0, found.length));
      expect(found.length).toBeGreaterThan(3);
      if (kept === sizeBytes) expect(found).toEqual(written);
      // A head is written in one step with its file: a file without one is no torn record.
      expect(damaged).toBe(kept < headBytes);
      await rm(killed, { recursive: true });
    }
  }, 60_000);
});
