import { describe, expect, it } from 'vitest';
import { moveDurationS } from '@/lib/program/motion';
import { travelMs } from '@/lib/program/reading/deadline';
import { correctedFeedPerMm, stepsPerMm } from '@/lib/quality/feed-calibration';

// trade.md 9. D: derived from the formula beside it. P: published and recomputed.
const moves: [number, number, number, number][] = [
  [100, 50, 1000, 2.05], // D
  [2.5, 50, 1000, 0.1], // D, exactly at the boundary v²/a
  [1, 50, 1000, 0.0632456], // D, never reaches its speed
];

describe('a move from rest to rest (trade.md 9)', () => {
  it.each(moves)('%d mm at %d mm/s and %d mm/s² takes %d s', (distanceMm, speed, acceleration, seconds) => {
    expect(moveDurationS(distanceMm, speed, acceleration)).toBeCloseTo(seconds, 7);
    expect(travelMs(distanceMm, speed, acceleration)).toBeCloseTo(seconds * 1000, 4);
  });

  it('peaks at 31.6228 mm/s where it never reaches its speed (D)', () => {
    // Half of the time is ramp: peak = a · T/2.
    expect((1000 * moveDurationS(1, 50, 1000)) / 2).toBeCloseTo(31.6228, 4);
  });

  it('takes no time for no way', () => {
    expect(moveDurationS(0, 50, 1000)).toBe(0);
    expect(travelMs(0, 50, 1000)).toBe(0);
  });
});

describe('the feed (trade.md 9)', () => {
  it('has 92.599 steps per mm on an 11 mm wheel with 200 · 16 steps (D)', () => {
    const drive = { fullSteps: 200, microsteps: 16, gear: 1, wheelDiameterMm: 11 };
    expect(stepsPerMm(drive)).toBeCloseTo(92.599, 3);
  });

  it.each([
    [93, 100, 89, 104.49], // P
    [92.6, 100, 105, 88.19], // P
  ])(
    'of %d is corrected for %d mm commanded and %d mm measured to %d (P)',
    (old, commanded, measured, corrected) =>
      expect(correctedFeedPerMm(old, commanded, measured)).toBeCloseTo(corrected, 2),
  );
});
