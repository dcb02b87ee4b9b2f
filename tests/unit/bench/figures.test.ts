import { describe, expect, it } from 'vitest';
import { mean, quantile, slopeOf } from '@/scripts/bench/figures';

describe('quantile', () => {
  it('gives the value in the middle, whatever the order', () => {
    expect(quantile([9, 1, 5], 0.5)).toBe(5);
  });

  it('goes from the least to the most', () => {
    const values = [4, 2, 8, 6];
    expect([quantile(values, 0), quantile(values, 1)]).toEqual([2, 8]);
  });

  it('lies between two values by the straight line', () => {
    // 11 values 0 to 100 in tens: 95 of 100 lie half way between the last two.
    const tens = Array.from({ length: 11 }, (_, index) => index * 10);
    expect(quantile(tens, 0.95)).toBeCloseTo(95, 10);
  });

  it('is no number without values', () => {
    expect(quantile([], 0.5)).toBeNaN();
  });
});

describe('slopeOf', () => {
  it('gives the rise of a straight line, without any error', () => {
    const points = [0, 1, 2, 3].map((x) => ({ x, y: 40 + 2 * x }));
    expect(slopeOf(points).slope).toBeCloseTo(2, 12);
    expect(slopeOf(points).standardError).toBeCloseTo(0, 12);
  });

  it('gives the standard error of a line worked by hand', () => {
    // Mean of y 1.5, sum of products 3, sum of squares of x 5.
    const ys = [0, 2, 2, 2];
    const { slope, standardError } = slopeOf(ys.map((y, x) => ({ x, y })));
    expect(slope).toBeCloseTo(0.6, 12);
    // Rests from 0.6x + 0.6: -0.6, 0.8, 0.2, -0.4; squares sum to 1.2; √(1.2 / 2 / 5).
    expect(standardError).toBeCloseTo(Math.sqrt(0.12), 12);
  });

  it('is no number for two points, through which any line goes', () => {
    const line = slopeOf([
      { x: 0, y: 1 },
      { x: 1, y: 2 },
    ]);
    expect(line).toEqual({ slope: Number.NaN, standardError: Number.NaN });
  });
});

describe('mean', () => {
  it('is the sum over the number', () => {
    expect(mean([1, 2, 6])).toBe(3);
  });
});
