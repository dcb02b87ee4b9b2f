/** One move from rest to rest: constant acceleration, cruise, the same deceleration. */
export interface Trapezoid {
  distanceMm: number;
  accelerationMmS2: number;
  peakMmS: number;
  rampS: number;
  totalS: number;
}

/**
 * Plans a move of `distanceMm` (0 or more) at no more than `speedMmS` and `accelerationMmS2`.
 * D >= v²/a: T = D/v + v/a, else T = 2·sqrt(D/a) (uniform acceleration).
 */
export function planTrapezoid(distanceMm: number, speedMmS: number, accelerationMmS2: number): Trapezoid {
  const peakMmS = Math.min(speedMmS, Math.sqrt(distanceMm * accelerationMmS2));
  const rampS = peakMmS / accelerationMmS2;
  const totalS = peakMmS === 0 ? 0 : distanceMm / peakMmS + rampS;
  return { distanceMm, accelerationMmS2, peakMmS, rampS, totalS };
}

/** @returns mm covered `atS` seconds after the start, held within the move. */
export function distanceAt(move: Trapezoid, atS: number): number {
  if (atS <= 0) return 0;
  if (atS >= move.totalS) return move.distanceMm;
  const rampMm = (move.accelerationMmS2 * move.rampS ** 2) / 2;
  if (atS < move.rampS) return (move.accelerationMmS2 * atS ** 2) / 2;
  const leftS = move.totalS - atS;
  if (leftS < move.rampS) return move.distanceMm - (move.accelerationMmS2 * leftS ** 2) / 2;
  return rampMm + move.peakMmS * (atS - move.rampS);
}

/** @returns seconds after the start at which `mm` of the move are covered: the inverse of distanceAt. */
export function timeAt(move: Trapezoid, mm: number): number {
  if (mm <= 0) return 0;
  if (mm >= move.distanceMm) return move.totalS;
  const rampMm = (move.accelerationMmS2 * move.rampS ** 2) / 2;
  if (mm < rampMm) return Math.sqrt((2 * mm) / move.accelerationMmS2);
  const leftMm = move.distanceMm - mm;
  if (leftMm < rampMm) return move.totalS - Math.sqrt((2 * leftMm) / move.accelerationMmS2);
  return move.rampS + (mm - rampMm) / move.peakMmS;
}
