/**
 * Seconds of a move from rest to rest: ramp up, travel, ramp down. `D ≥ v²/a`: D/v + v/a, else 2·√(D/a)
 * (trade.md 9). Distance in mm, speed in mm/s, acceleration in mm/s².
 */
export function moveDurationS(distanceMm: number, speedMmS: number, accelerationMmS2: number): number {
  if (distanceMm >= speedMmS ** 2 / accelerationMmS2) {
    return distanceMm / speedMmS + speedMmS / accelerationMmS2;
  }
  return 2 * Math.sqrt(distanceMm / accelerationMmS2);
}
