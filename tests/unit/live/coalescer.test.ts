import { describe, expect, it } from 'vitest';
import { Coalescer, type Timing } from '@/lib/live/coalescer';

/** A clock that stands still until it is told to go on. */
function stillClock() {
  let nowMs = 0;
  let waiting: { atMs: number; act: () => void }[] = [];
  const timing: Timing = {
    nowMs: () => nowMs,
    after: (ms, act) => void waiting.push({ atMs: nowMs + ms, act }),
  };
  const pass = async (ms: number) => {
    nowMs += ms;
    const due = waiting.filter(({ atMs }) => atMs <= nowMs);
    waiting = waiting.filter(({ atMs }) => atMs > nowMs);
    for (const { act } of due) act();
    await new Promise(setImmediate);
  };
  return { timing, pass };
}

function coalescer(
  flush: (keys: string[]) => Promise<void>,
  onFailed: (cause: unknown) => void = () => undefined,
) {
  const clock = stillClock();
  return { ...clock, coalescer: new Coalescer(50, flush, onFailed, clock.timing) };
}

describe('a coalescer', () => {
  it('hands on at once after a rest, then what came within 50 ms together and each key once', async () => {
    const handed: string[][] = [];
    const { coalescer: it, pass } = coalescer(async (keys) => void handed.push(keys));
    it.add('a');
    await pass(0);
    for (const key of ['b', 'a', 'b', 'c']) it.add(key);
    await pass(49);
    expect(handed).toEqual([['a']]);
    await pass(1);
    expect(handed).toEqual([['a'], ['b', 'a', 'c']]);
  });

  it('never hands on while it still does, and then what came meanwhile', async () => {
    const handed: string[][] = [];
    let finish: () => void = () => undefined;
    const { coalescer: it, pass } = coalescer((keys) => {
      handed.push(keys);
      return new Promise((resolve) => (finish = resolve));
    });
    it.add('a');
    await pass(0);
    it.add('b');
    await pass(1_000);
    expect(handed).toEqual([['a']]);
    finish();
    await pass(0);
    await pass(50);
    expect(handed).toEqual([['a'], ['b']]);
  });

  it('tries what failed again after a second, with what came meanwhile', async () => {
    const handed: string[][] = [];
    const causes: unknown[] = [];
    const { coalescer: it, pass } = coalescer(
      async (keys) => {
        handed.push(keys);
        if (handed.length === 1) throw new Error('away');
      },
      (cause) => causes.push(cause),
    );
    it.add('a');
    await pass(0);
    it.add('b');
    await pass(999);
    expect(handed).toHaveLength(1);
    await pass(1);
    expect(handed[1]?.toSorted()).toEqual(['a', 'b']);
    expect(causes).toHaveLength(1);
  });
});
