import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ruleTicks } from '@/components/ui/rule.series';

describe('marks of a rule', () => {
  it('numbers 400 pieces at 100, 200, 300 and 400', () => {
    expect(ruleTicks(400, 5).flatMap((tick) => tick.label ?? [])).toEqual(['100', '200', '300', '400']);
  });

  it('has no marks for nothing', () => {
    expect(ruleTicks(0, 5)).toEqual([]);
    expect(ruleTicks(Number.NaN, 5)).toEqual([]);
  });

  it('never numbers more than asked for, never leaves the rule, and stays drawable', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 9999 }), fc.integer({ min: 2, max: 8 }), (max, labelsMost) => {
        const ticks = ruleTicks(max, labelsMost);
        expect(ticks.filter((tick) => tick.label !== null).length).toBeLessThanOrEqual(labelsMost);
        expect(ticks.every((tick) => tick.ratio >= 0 && tick.ratio <= 1)).toBe(true);
        expect(ticks.length).toBeLessThanOrEqual(10 * labelsMost + 1);
      }),
    );
  });
});
