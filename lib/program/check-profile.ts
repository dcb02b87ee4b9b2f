import type { Profile } from './profile';

/** What is wrong with one number of a profile; `path` leads to it, as in `['feed', 'trimMm']`. */
export interface ProfileFault {
  path: [section: 'cutAxis' | 'feed', name: string];
  message: string;
}

/** Least and most of each number: beyond them a program cannot be written, or the rig's answer not be trusted. */
const CUT_AXIS_RANGES: Partial<Record<keyof Profile['cutAxis'], [leastOf: number, mostOf: number]>> = {
  homeMm: [-1000, 1000],
  standbyMm: [-1000, 1000],
  cutMm: [-1000, 1000],
  parkMm: [-1000, 1000],
  lowestMm: [-1000, 1000],
  highestMm: [-1000, 1000],
  speedMmS: [0.1, 1000],
  accelerationMmS2: [1, 100_000],
  // Coarser than a twentieth of a mm, the jaws meet or miss by the luck of a step.
  stepsPerMm: [20, 100_000],
};

const FEED_RANGES: Record<keyof Profile['feed'], [leastOf: number, mostOf: number]> = {
  // `M114` prints hundredths of a unit: below this a feed of a tenth of a mm is not seen.
  feedPerMm: [0.1, 100],
  speedMmS: [1, 1000],
  accelerationMmS2: [1, 100_000],
  longestMoveMm: [1, 150],
  shortestPieceMm: [1, 20_000],
  longestPieceMm: [1, 20_000],
  trimMm: [0.5, 1000],
};

/** `M114` prints hundredths of a mm and counts whole steps; less than this is not told apart by it. */
const CUT_CLEARANCE_MM = 0.1;
const CUT_CLEARANCE_STEPS = 10;

/** The firmware keeps the feed in single precision: beyond this its answer may be off by more than a hundredth. */
const PIECE_UNITS_MOST = 100_000;

function outside(value: number, [least, most]: [number, number]): string | null {
  if (value < least) return `At least ${least}.`;
  return value > most ? `At most ${most}.` : null;
}

function rangeFaults<Section extends 'cutAxis' | 'feed'>(
  section: Section,
  ranges: Partial<Record<string, [number, number]>>,
  profile: Profile,
): ProfileFault[] {
  return Object.entries<unknown>(profile[section]).flatMap(([name, value]) => {
    const range = ranges[name];
    const message = range && typeof value === 'number' ? outside(value, range) : null;
    return message === null ? [] : [{ path: [section, name], message }];
  });
}

/** Moving past the cut, to home or to park, would shut the jaws once more than the program counts. */
function cutFaults({ cutAxis }: Profile): ProfileFault[] {
  const { standbyMm, cutMm, stepsPerMm } = cutAxis;
  const faults: ProfileFault[] = [];
  const strokeMm = Math.abs(standbyMm - cutMm);
  if (strokeMm < CUT_CLEARANCE_MM || strokeMm * stepsPerMm < CUT_CLEARANCE_STEPS) {
    const message = `Must be ${CUT_CLEARANCE_MM} mm and ${CUT_CLEARANCE_STEPS} steps or more from standby.`;
    faults.push({ path: ['cutAxis', 'cutMm'], message });
  }
  const towardsOpen = Math.sign(standbyMm - cutMm);
  for (const name of ['homeMm', 'parkMm'] as const) {
    if ((cutAxis[name] - cutMm) * towardsOpen >= CUT_CLEARANCE_MM) continue;
    const message = `Must lie on the standby side of the cut, ${CUT_CLEARANCE_MM} mm or more from it.`;
    faults.push({ path: ['cutAxis', name], message });
  }
  return faults;
}

/**
 * What in a well-formed profile no rig can be run by. Asked when a profile is published and before any program is
 * sent; older profiles stay readable.
 */
export function profileFaults(profile: Profile): ProfileFault[] {
  const faults = [
    ...rangeFaults('cutAxis', CUT_AXIS_RANGES, profile),
    ...rangeFaults('feed', FEED_RANGES, profile),
    ...cutFaults(profile),
  ];
  const { longestPieceMm, feedPerMm } = profile.feed;
  if (longestPieceMm * feedPerMm > PIECE_UNITS_MOST) {
    faults.push({ path: ['feed', 'longestPieceMm'], message: 'At most 100,000 feed units long.' });
  }
  return faults;
}
