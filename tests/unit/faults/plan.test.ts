import { describe, expect, it } from 'vitest';
import { houseFaultsOf, RIG_FAULTS, scheduleOf } from '@/scripts/faults/plan';

const SEEDS = Array.from({ length: 400 }, (_, index) => index);

describe('a schedule', () => {
  it('is the same for the same seed, and another for the next', () => {
    expect(scheduleOf(7)).toEqual(scheduleOf(7));
    expect(scheduleOf(7)).not.toEqual(scheduleOf(8));
  });

  it('brings about every kind of fault within some hundred seeds', () => {
    const struck = new Set(SEEDS.flatMap((seed) => scheduleOf(seed).strikes.map(({ fault }) => fault.kind)));
    expect([...struck].sort()).toEqual([...RIG_FAULTS].sort());
    const house = new Set(SEEDS.flatMap((seed) => houseFaultsOf(seed).map(({ fault }) => fault.kind)));
    expect(house.size).toBe(5);
  });

  it('strikes in the order of the lines, at least once', () => {
    for (const seed of SEEDS) {
      const lines = scheduleOf(seed).strikes.map(({ atLine }) => atLine);
      expect(lines.length).toBeGreaterThan(0);
      expect(lines).toEqual(lines.toSorted((one, other) => one - other));
    }
  });

  it('leaves out what a computer cannot bring about, and nothing else', () => {
    const seed = SEEDS.find((own) => scheduleOf(own).strikes.some(({ fault }) => fault.kind === 'disk-full'));
    if (seed === undefined) throw new Error('no seed fills a disk');
    const without = RIG_FAULTS.filter((kind) => kind !== 'disk-full');
    const strikes = scheduleOf(seed).strikes.filter(({ fault }) => fault.kind !== 'disk-full');
    expect(scheduleOf(seed, without).strikes).toEqual(strikes);
  });
});
