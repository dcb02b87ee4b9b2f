import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { lotPiecesMost, splitPieces } from '@/lib/plan/split-lots';

const sum = (numbers: number[]): number => numbers.reduce((a, b) => a + b, 0);

describe('the lots of a line', () => {
  it.each([
    [0, 400, []],
    [1, 400, [1]],
    [399, 400, [399]],
    [400, 400, [400]],
    [401, 400, [201, 200]],
    [1000, 400, [334, 333, 333]],
    [3, 1, [1, 1, 1]],
  ])('of %i pieces, at most %i a lot, are %j', (pieces, most, lots) => {
    expect(splitPieces(pieces, most)).toEqual(lots);
  });

  it('add up to the line, are even to one piece and as few as can be', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 100_000 }), fc.integer({ min: 1, max: 9999 }), (pieces, most) => {
        const lots = splitPieces(pieces, most);
        expect(sum(lots)).toBe(pieces);
        expect(Math.max(...lots)).toBeLessThanOrEqual(most);
        expect(Math.max(...lots) - Math.min(...lots)).toBeLessThanOrEqual(1);
        expect(lots).toHaveLength(Math.ceil(pieces / most));
      }),
    );
  });
});

describe('the most pieces of a lot', () => {
  const limits = { workshopMost: 400, lengthMm: 100, longestSpoolMm: null, trimMm: 20 };
  it.each([
    ['the workshop’s number', {}, 400],
    ['what the register counts', { workshopMost: 20_000 }, 9999],
    ['what the longest spool gives beside the trim', { longestSpoolMm: 10_020 }, 100],
    ['one piece less when the trim would be short', { longestSpoolMm: 10_019 }, 99],
    ['never below one', { longestSpoolMm: 50 }, 1],
  ])('is %s', (_what, change, most) => {
    expect(lotPiecesMost({ ...limits, ...change })).toBe(most);
  });
});
