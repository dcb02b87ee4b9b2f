import { AXES, type Axes } from '../../mechanics/axes';
import type { Command } from '../command';
import type { Firmware } from '../firmware';
import type { Commands, Handler, Run } from './table';
import { atOnce, motionEnded } from './waits';

/** @returns a settings line such as `M203 X200.00 Y200.00 Z25.00 E60.00`. */
export function axesText(code: string, values: Axes): string {
  return `${code} ${AXES.map((axis) => `${axis}${values[axis].toFixed(2)}`).join(' ')}`;
}

/** A command that sets one number for each axis named, and reports all of them when none is. */
function perAxis(code: string, values: (firmware: Firmware) => Axes): Handler {
  return (firmware, command) =>
    atOnce(() => {
      const named = AXES.filter((axis) => command.words.get(axis) !== undefined);
      for (const axis of named) values(firmware)[axis] = command.words.get(axis) ?? values(firmware)[axis];
      if (named.length === 0) firmware.send(`echo:  ${axesText(code, values(firmware))}`);
    });
}

function coldFeed(firmware: Firmware, command: Command): void {
  const lowestC = command.words.get('S');
  const permit = command.words.get('P');
  if (!firmware.family.zeroAllowsColdFeed) {
    firmware.memory.coldFeedAllowed = lowestC !== 0;
    return;
  }
  if (lowestC !== undefined) firmware.memory.coldFeedAllowed = lowestC === 0;
  if (command.words.has('P')) firmware.memory.coldFeedAllowed = permit !== 0;
  if (lowestC !== undefined || command.words.has('P')) return;
  const able = firmware.memory.coldFeedAllowed ? 'enabled' : 'disabled';
  firmware.send(`echo:Cold extrudes are ${able} (min temp ${firmware.settings.coldBelowC}C)`);
}

function softStops(firmware: Firmware, command: Command): void {
  const on = command.words.get('S');
  if (on !== undefined) firmware.memory.softStops = on !== 0;
  const { softLowestMm: low, softHighestMm: high } = firmware.settings;
  const text = (places: Axes) =>
    ['X', 'Y', 'Z'].map((axis) => `${axis}${places[axis as keyof Axes].toFixed(2)}`);
  const state = firmware.memory.softStops ? 'ON' : 'OFF';
  firmware.send(`echo:Soft endstops: ${state}  Min:  ${text(low).join(' ')}   Max:  ${text(high).join(' ')}`);
}

function* letGo(firmware: Firmware, command: Command): Run {
  const seconds = command.words.get('S');
  if (seconds !== undefined) {
    firmware.memory.steppersHoldMs = seconds * 1000;
    return;
  }
  yield motionEnded(firmware);
  const named = AXES.filter((axis) => command.words.has(axis));
  firmware.letGo(named.length > 0 ? named : AXES, 'command');
}

function energise(firmware: Firmware, command: Command): void {
  const named = AXES.filter((axis) => command.words.has(axis));
  firmware.mechanics.energise(named.length > 0 ? named : AXES, true);
  firmware.stepper.lastMotionMs = firmware.nowMs;
}

/** What the board can be told about itself; all of it is lost at a reset. */
export const settingCommands: Commands = {
  M17: (firmware, command) => atOnce(() => energise(firmware, command)),
  M18: letGo,
  M84: letGo,
  M92: perAxis('M92', (firmware) => firmware.stepsPerMm),
  M201: perAxis('M201', (firmware) => firmware.accelerationMmS2),
  M203: perAxis('M203', (firmware) => firmware.speedMmS),
  M211: (firmware, command) => atOnce(() => softStops(firmware, command)),
  M302: (firmware, command) => atOnce(() => coldFeed(firmware, command)),
};
