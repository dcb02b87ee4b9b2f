import { describe, expect, it } from 'vitest';
import { summarise } from '@/scripts/bench/agent-time/summary';

const added = (totalMs: number) => ({ totalMs, byLine: { M400: totalMs } });
const SHORT = { lengthMm: 25, pieces: 2, wholeMs: [110, 112], idealMs: [100, 100] };
const LONG = { lengthMm: 114, pieces: 1, wholeMs: [309], idealMs: [300] };

describe('the summary of timed runs', () => {
  it('gives each length its own pieces', () => {
    const { details } = summarise([SHORT, LONG], [added(1), added(3), added(9)]);
    expect(details.byLength).toMatchObject([
      { lengthMm: 25, addedMsP50: 2, idealMsPerPiece: 100, wholeMsPerPiece: 111, wholeOverIdeal: 1.11 },
      { lengthMm: 114, addedMsP50: 9, wholeOverIdeal: 1.03 },
    ]);
    expect(details.beforeLine).toMatchObject([{ line: 'M400', pieces: 3, msP50: 3 }]);
  });

  it('compares with the ideal motion of a piece', () => {
    const result = summarise([SHORT], [added(5), added(5)]);
    expect(result).toMatchObject({ value: 5, baseline: 100, ratio: 0.05, goal: 3 });
  });

  it('refuses to speak when not every piece was timed', () => {
    expect(() => summarise([SHORT, LONG], [added(1), added(3)])).toThrow('2 of 3');
  });
});
