import { AXES, LINEAR_AXES, allAxes, type Axes } from '../../mechanics/axes';
import { planTrapezoid } from '../../mechanics/trapezoid';
import type { Command } from '../command';
import type { Firmware } from '../firmware';
import type { Commands, Run } from './table';
import { atOnce, motionEnded, slotFree, until } from './waits';

/** @returns where the words of a move lead, in native mm. */
function targetOf(firmware: Firmware, command: Command): Axes {
  const { position } = firmware;
  const target = { ...position.nativeMm };
  for (const axis of AXES) {
    const word = command.words.get(axis);
    if (word === undefined) continue;
    const relative = axis === 'E' ? position.relativeFeed : position.relative;
    target[axis] = Math.fround(relative ? target[axis] + word : word - position.offsetMm[axis]);
  }
  if (firmware.memory.softStops) position.clip(target);
  return target;
}

/** Cold or too long a feed is left out of the move, yet the coordinate goes on as if it had happened. */
function feedRefusal(firmware: Firmware, feedMm: number): string | undefined {
  if (feedMm === 0) return undefined;
  const { settings, memory, mechanics } = firmware;
  if (!memory.coldFeedAllowed && mechanics.heater.temperatureC < settings.coldBelowC) {
    return 'echo: cold extrusion prevented';
  }
  const longestMm = Math.min(settings.longestFeedMm, firmware.family.longestFeedMm);
  return Math.abs(feedMm) > longestMm ? 'echo: too long extrusion prevented' : undefined;
}

/** @returns the way of each axis in whole steps, put back into mm. */
function wholeSteps(firmware: Firmware, from: Axes, to: Axes): Axes {
  const delta = allAxes(0);
  for (const axis of AXES) {
    const perMm = firmware.stepsPerMm[axis];
    delta[axis] = (Math.round(to[axis] * perMm) - Math.round(from[axis] * perMm)) / perMm;
  }
  return delta;
}

/** Speed and acceleration along the way, so that no axis passes its own limit. */
function planMove(firmware: Firmware, deltaMm: Axes) {
  const linearMm = Math.hypot(...LINEAR_AXES.map((axis) => deltaMm[axis]));
  const distanceMm = linearMm > 0 ? linearMm : Math.abs(deltaMm.E);
  let speed = firmware.position.speedMmS;
  let acceleration = Number.POSITIVE_INFINITY;
  for (const axis of AXES) {
    const share = Math.abs(deltaMm[axis]) / distanceMm;
    if (share === 0) continue;
    speed = Math.min(speed, firmware.speedMmS[axis] / share);
    acceleration = Math.min(acceleration, firmware.accelerationMmS2[axis] / share);
  }
  return planTrapezoid(distanceMm, speed, acceleration);
}

function* move(firmware: Firmware, command: Command): Run {
  if (firmware.state !== 'running') return;
  const { position, stepper, registerAxis } = firmware;
  const perMinute = command.words.get('F');
  if (perMinute !== undefined && perMinute > 0) position.speedMmS = perMinute / 60;
  const target = targetOf(firmware, command);
  yield slotFree(firmware);
  const deltaMm = wholeSteps(firmware, position.nativeMm, target);
  const refusal = feedRefusal(firmware, target.E - position.nativeMm.E);
  if (refusal !== undefined) {
    firmware.send(refusal);
    deltaMm.E = 0;
  }
  Object.assign(position.nativeMm, target);
  if (AXES.every((axis) => deltaMm[axis] === 0)) return;
  stepper.add({
    deltaMm,
    trapezoid: planMove(firmware, deltaMm),
    homing: false,
    register: position.logical(registerAxis),
    feedMm: position.logical('E'),
  });
}

function* dwell(firmware: Firmware, command: Command): Run {
  yield motionEnded(firmware);
  const seconds = command.words.get('S');
  const ms = seconds === undefined ? (command.words.get('P') ?? 0) : seconds * 1000;
  yield until(firmware.nowMs + ms);
}

function* awaitMotion(firmware: Firmware): Run {
  yield motionEnded(firmware);
}

/** Moves and what ends with them. Speed and place are in mm, times in ms of mechanical time. */
export const motionCommands: Commands = {
  G0: move,
  G1: move,
  G4: dwell,
  M400: awaitMotion,
  M82: (firmware) => atOnce(() => void (firmware.position.relativeFeed = false)),
  M83: (firmware) => atOnce(() => void (firmware.position.relativeFeed = true)),
  G90: (firmware) => atOnce(() => setRelative(firmware, false)),
  G91: (firmware) => atOnce(() => setRelative(firmware, true)),
};

function setRelative(firmware: Firmware, relative: boolean): void {
  firmware.position.relative = relative;
  firmware.position.relativeFeed = relative;
}
