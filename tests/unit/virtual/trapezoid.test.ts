import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { distanceAt, planTrapezoid, timeAt } from '@/agent/virtual/mechanics/trapezoid';
import { RigAtHand } from './rig-at-hand';

describe('a move from rest to rest', () => {
  // Check values derived from D >= v²/a: T = D/v + v/a, else 2·sqrt(D/a).
  it.each([
    [100, 2.05, 50],
    [2.5, 0.1, 50],
    [1, 0.0632456, 31.6228],
  ])('of %d mm at 50 mm/s and 1000 mm/s² takes %d s and peaks at %d mm/s', (distanceMm, totalS, peakMmS) => {
    const move = planTrapezoid(distanceMm, 50, 1000);
    expect(move.totalS).toBeCloseTo(totalS, 6);
    expect(move.peakMmS).toBeCloseTo(peakMmS, 4);
  });

  it('takes no time when it goes nowhere', () => {
    expect(planTrapezoid(0, 50, 1000).totalS).toBe(0);
  });

  it('is at a place at the time that is given for the place', () => {
    const size = fc.double({ min: 0.01, max: 500, noNaN: true });
    fc.assert(
      fc.property(
        size,
        size,
        size,
        fc.double({ min: 0, max: 1, noNaN: true }),
        (distance, speed, accel, share) => {
          const move = planTrapezoid(distance, speed, accel);
          const mm = share * distance;
          expect(distanceAt(move, timeAt(move, mm))).toBeCloseTo(mm, 4);
        },
      ),
    );
  });

  it('keeps to the limits of M203 and M201, whatever speed is asked for', () => {
    const rig = new RigAtHand();
    rig.runAll('M203 X50', 'M201 X1000');
    const before = rig.core.nowMs;
    rig.runAll('G1 X100 F60000', 'M400');
    expect(rig.core.nowMs - before).toBeCloseTo(2050, 6);
  });

  it('is slowed to the speed asked for', () => {
    const rig = new RigAtHand();
    const before = rig.core.nowMs;
    rig.runAll('G1 X100 F600', 'M400');
    expect(rig.core.nowMs - before).toBeCloseTo(10_010, 6);
  });
});
