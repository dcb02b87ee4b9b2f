import { FEED_DECIMALS, feedTargets } from './feed-moves';
import { moveDurationS } from './motion';
import type { Profile } from './profile';

/** One line of G-code and the seconds of motion that it causes. */
export interface ProgramLine {
  text: string;
  motionS: number;
}

const POSITION_DECIMALS = 3;
const SPEED_DECIMALS = 3;

/** No profile says how fast the firmware homes; 4 mm/s is slow enough for a screw-driven axis. */
const HOMING_SPEED_MM_S = 4;

/** The tag stands above four digits of pieces: 990000 + 9999 is within the seven digits kept exactly. */
const REGISTER_PER_TAG = 10_000;

function decimal(value: number, decimals: number): string {
  const text = value.toFixed(decimals).replace(/\.?0+$/, '');
  return text === '-0' ? '0' : text;
}

/** Rounded down, so that the printed speed is never above the profile's. */
function speedWord(unitsPerS: number): string {
  const scale = 10 ** SPEED_DECIMALS;
  return `F${decimal(Math.floor(unitsPerS * 60 * scale + 1e-6) / scale, SPEED_DECIMALS)}`;
}

const still = (text: string): ProgramLine => ({ text, motionS: 0 });

/**
 * The firmware goes whole steps, counted from home: on a coarse axis a stroke is longer or shorter than its mm say.
 * It reckons in single precision, which decides where a position falls between two steps.
 */
function strokeMm({ homeMm, stepsPerMm }: Profile['cutAxis'], fromMm: number, toMm: number): number {
  const stepsAt = (mm: number) => Math.round(Math.fround(Math.fround(mm) - Math.fround(homeMm)) * stepsPerMm);
  return Math.abs(stepsAt(toMm) - stepsAt(fromMm)) / stepsPerMm;
}

function press({ cutAxis }: Profile, fromMm: number, toMm: number): ProgramLine {
  const distanceMm = strokeMm(cutAxis, fromMm, toMm);
  return {
    text: `G1 ${cutAxis.axis}${decimal(toMm, POSITION_DECIMALS)} ${speedWord(cutAxis.speedMmS)}`,
    motionS: moveDurationS(distanceMm, cutAxis.speedMmS, cutAxis.accelerationMmS2),
  };
}

const shut = (profile: Profile) => press(profile, profile.cutAxis.standbyMm, profile.cutAxis.cutMm);
const open = (profile: Profile) => press(profile, profile.cutAxis.cutMm, profile.cutAxis.standbyMm);

function feeds({ feed }: Profile, lengthMm: number): ProgramLine[] {
  const speed = speedWord(feed.speedMmS * feed.feedPerMm);
  let fedTo = 0;
  return feedTargets(feed, lengthMm).map((target) => {
    const distanceMm = (target - fedTo) / feed.feedPerMm;
    fedTo = target;
    return {
      text: `G1 E${decimal(target, FEED_DECIMALS)} ${speed}`,
      motionS: moveDurationS(distanceMm, feed.speedMmS, feed.accelerationMmS2),
    };
  });
}

/** Settings that a reset forgets: cold feed allowed, steppers never let go, cuts below zero not clipped. */
export function preambleLines({ cutAxis, fitted }: Profile): ProgramLine[] {
  const lines = ['M302 P1', 'M84 S0'];
  if (cutAxis.homing === 'endstop') lines.push('M211 S0');
  if (fitted.wireSwitch) lines.push('M412 H1', 'M75');
  return [...lines, 'G90', 'M82', 'G92 E0'].map(still);
}

/** From an unknown position to standby. The home position gets a value that can be crossed both ways. */
export function homeLines(profile: Profile): ProgramLine[] {
  const { axis, homing, homeMm, standbyMm, lowestMm, highestMm, speedMmS } = profile.cutAxis;
  const homingS = (highestMm - lowestMm) / Math.min(speedMmS, HOMING_SPEED_MM_S);
  return [
    ...(homing === 'endstop' ? [{ text: `G28 ${axis}`, motionS: homingS }] : []),
    still(`G92 ${axis}${decimal(homeMm, POSITION_DECIMALS)}`),
    press(profile, homeMm, standbyMm),
    still('M400'),
    still('M114'),
  ];
}

/** A cut that squares the wire's end and counts as no piece. */
export function trimLines(profile: Profile): ProgramLine[] {
  return [
    still('G92 E0'),
    ...feeds(profile, profile.feed.trimMm),
    shut(profile),
    still('M400'),
    still('M114'),
    still('G92 E0'),
    open(profile),
    still('M400'),
  ];
}

/** The line that says "run `tag`, `piece` pieces cut" and zeroes the feed; without a register it only zeroes. */
export function registerLine({ registerAxis }: Profile, tag: number, piece: number): ProgramLine {
  return still(registerAxis === null ? 'G92 E0' : `G92 ${registerAxis}${tag * REGISTER_PER_TAG + piece} E0`);
}

/** Feed, cut, ask, count with the jaws still shut, open (design.md 5). */
export function pieceLines(profile: Profile, lengthMm: number, tag: number, piece: number): ProgramLine[] {
  return [
    ...feeds(profile, lengthMm),
    shut(profile),
    still('M400'),
    still('M114'),
    registerLine(profile, tag, piece),
    open(profile),
  ];
}

/** The job timer off, then the pusher parked clear of the handles. */
export function endLines(profile: Profile): ProgramLine[] {
  const { standbyMm, parkMm } = profile.cutAxis;
  return [
    ...(profile.fitted.wireSwitch ? [still('M77')] : []),
    still('M400'),
    press(profile, standbyMm, parkMm),
    still('M400'),
    still('M114'),
  ];
}
