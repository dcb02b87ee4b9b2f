import type { RigInput } from '@/agent/virtual/settings';
import type { Profile } from '@/lib/program/profile';

/** The feed motor's steps for a mm of wire: a common extruder, 92.6 and more (trade.md 9). */
const FEED_STEPS_PER_MM = 93;

/** Jaws and springs are at rest so near to the cut that home and park, 0.1 mm off and more, never touch them. */
const JAWS_OPEN_MM = 0.06;

/**
 * A virtual rig that is built as the profile says, in the profile's own coordinates: the jaws meet within half a step
 * of the cut, the travel ends where the profile's does, nothing slips, no blade dulls, no spool ends. The travel has
 * a step and the last printed decimal to spare: finer than that nothing is commanded.
 */
export function rigOfProfile({ cutAxis, feed, registerAxis, fitted }: Profile): RigInput {
  const { axis, homing, homeMm, standbyMm, cutMm, lowestMm, highestMm, stepsPerMm } = cutAxis;
  const spareMm = 1 / stepsPerMm + 0.001;
  const towardsOpen = Math.sign(standbyMm - cutMm);
  const openMm = cutMm + towardsOpen * JAWS_OPEN_MM;
  return {
    resetOnOpen: false,
    registerAxis: registerAxis ?? (axis === 'Y' ? 'X' : 'Y'),
    firmware: {
      emergencyParser: fitted.emergencyParser,
      guardSwitch: fitted.guardSwitch?.endstop ?? null,
      guardClosedReads: fitted.guardSwitch?.closedReads ?? 'TRIGGERED',
      wireSwitch: fitted.wireSwitch,
      stepsPerMm: { [axis]: stepsPerMm, E: FEED_STEPS_PER_MM / feed.feedPerMm },
      speedMmS: { [axis]: cutAxis.speedMmS, E: feed.speedMmS * feed.feedPerMm },
      accelerationMmS2: { [axis]: cutAxis.accelerationMmS2, E: feed.accelerationMmS2 * feed.feedPerMm },
      // Years: the answers of a slow rig are not drowned in `busy`.
      keepaliveMs: 1e12,
    },
    mechanics: {
      cutAxis: axis,
      switchMm: { [axis]: homeMm },
      startMm: { [axis]: homing === 'endstop' ? standbyMm : homeMm },
      lowestMm: { [axis]: lowestMm - spareMm },
      highestMm: { [axis]: highestMm + spareMm },
      jaws: { closedMm: cutMm + (towardsOpen * 0.5) / stepsPerMm, openMm, restMm: openMm },
      wirePerUnit: 1 / feed.feedPerMm,
      spoolMm: 1e9,
      blade: { lifeCuts: 1e12 },
      guardCutsMotorPower: fitted.guardCutsMotorPower,
    },
  };
}
