import type { Profile } from '../profile';

/** Homing runs at a speed that the firmware keeps to itself; slower than any we have met, so that waiting is not a fault. */
const SLOWEST_HOMING_MM_S = 2;

/** Milliseconds in which a rig of constant acceleration goes `distance` from rest to rest: the area under its speed. */
export function travelMs(distance: number, speed: number, acceleration: number): number {
  const rampS = Math.min(speed / acceleration, Math.sqrt(distance / acceleration));
  const travelledInRamps = acceleration * rampS ** 2;
  return 1000 * (2 * rampS + (distance - travelledInRamps) / speed);
}

/** Milliseconds after which homing over the whole travel must have ended. */
export function homingMs({ cutAxis }: Profile): number {
  const slowest = Math.min(SLOWEST_HOMING_MM_S, cutAxis.speedMmS);
  return (1000 * (cutAxis.highestMm - cutAxis.lowestMm)) / slowest;
}
