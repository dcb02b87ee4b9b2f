import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { bagCode, readBagCode } from '@/lib/fleet/bag-code';
import { baggedOf, sumsHold } from '@/lib/fleet/counts';
import { firstPiecesGroup, piecesToMeasure, withinTolerance } from '@/lib/fleet/first-pieces';

describe('the count in the bag', () => {
  it('is cut less scrap, samples and doubted ones: 200 less 3, 2 and 1 is 194', () => {
    expect(baggedOf(200, { scrapped: 3, sampled: 2, doubted: 1 })).toBe(194);
  });

  it('takes no more out than was cut, and gives none back that was not taken', () => {
    const taken = fc.record({ scrapped: fc.nat(50), sampled: fc.nat(50), doubted: fc.nat(50) });
    fc.assert(
      fc.property(fc.nat(200), taken, (cut, sums) => {
        const all = sums.scrapped + sums.sampled + sums.doubted;
        expect(sumsHold(cut, sums)).toBe(all <= cut);
        expect(baggedOf(cut, sums) + all).toBe(cut);
      }),
    );
    expect(sumsHold(5, { scrapped: -1, sampled: 0, doubted: 0 })).toBe(false);
  });
});

describe('first pieces', () => {
  const facts = { firstPieces: 5, cut: 5, measuredThrough: 0, heldForThem: true };

  it.each([
    [facts, [1, 2, 3, 4, 5]],
    [{ ...facts, cut: 3 }, [1, 2, 3]],
    [{ ...facts, measuredThrough: 5 }, []],
    [{ ...facts, cut: 12, measuredThrough: 5 }, [8, 9, 10, 11, 12]],
    [{ ...facts, cut: 7, measuredThrough: 5 }, [6, 7]],
    [{ ...facts, cut: 0 }, []],
    [{ ...facts, heldForThem: false }, []],
  ])('of %o are to be measured: %o', (given, pieces) => {
    expect(piecesToMeasure(given)).toEqual(pieces);
  });

  it('stay one group after they are measured, so that a mistyped one can be entered again', () => {
    expect(firstPiecesGroup({ ...facts, cut: 12, measuredThrough: 12 })).toEqual([8, 9, 10, 11, 12]);
  });

  it.each([
    [99.999, false],
    [100, true],
    [103, true],
    [103.001, false],
    [100 + 0.1 + 0.2 - 0.3, true],
  ])('of %d mm against 100 −0/+3 are within: %s', (lengthMm, within) => {
    expect(withinTolerance(lengthMm, { lengthMm: 100, toleranceMinusMm: 0, tolerancePlusMm: 3 })).toBe(
      within,
    );
  });
});

describe('the code on a bag', () => {
  it('is read back as it was made, however it was typed', () => {
    const runId = '9f0c1d2e-0000-4000-8000-000000000000';
    const code = bagCode({ batchNumber: 12, linePosition: 3, lotNumber: 1, runId });
    expect(code).toBe('EW-12-3-1-9F0C');
    expect(readBagCode(' ew-12-3-1-9f0c ')).toEqual({
      batchNumber: 12,
      linePosition: 3,
      lotNumber: 1,
      runDigits: '9F0C',
    });
  });

  it.each(['', 'EW-12-3-1', 'EW-12-3-1-9F0', 'EW-12-3-1-9F0C-2', 'XX-12-3-1-9F0C'])(
    '"%s" is none',
    (code) => {
      expect(readBagCode(code)).toBeNull();
    },
  );
});
