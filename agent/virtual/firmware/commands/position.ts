import { AXES, LINEAR_AXES, allAxes, type LinearAxis } from '../../mechanics/axes';
import { planTrapezoid } from '../../mechanics/trapezoid';
import type { Command } from '../command';
import type { Firmware } from '../firmware';
import type { Commands, Run } from './table';
import { atOnce, motionEnded } from './waits';

/** @returns the `M114` line: logical coordinates, then the step counters of the present moment. */
export function positionText(firmware: Firmware): string {
  const { position, stepper, stepsPerMm } = firmware;
  const places = AXES.map((axis) => `${axis}:${position.logical(axis).toFixed(2)}`);
  if (!firmware.family.tellsSteps) return places.join(' ');
  const steps = LINEAR_AXES.map(
    (axis) => `${axis}:${Math.round(stepper.presentMm[axis] * stepsPerMm[axis])}`,
  );
  return `${places.join(' ')} Count ${steps.join(' ')}`;
}

function rename(firmware: Firmware, command: Command): void {
  for (const axis of AXES) {
    const word = command.words.get(axis);
    if (word !== undefined) firmware.stepper.presentMm[axis] += firmware.position.rename(axis, word);
  }
  if (firmware.family.tellsSteps) firmware.send(positionText(firmware));
  else if (LINEAR_AXES.some((axis) => command.words.has(axis))) firmware.send(offsetText(firmware));
}

/** @returns how a family that does not tell the position answers `G92` of X, Y or Z. */
function offsetText({ position }: Firmware): string {
  return LINEAR_AXES.map((axis) => `${axis}_OFFSET:${position.offsetMm[axis].toFixed(3)}`).join(' ');
}

/** Runs one axis onto its switch. @returns false when the switch never came. */
function* homeAxis(firmware: Firmware, axis: LinearAxis): Generator<ReturnType<typeof motionEnded>, boolean> {
  const { mechanics, stepper, settings, position } = firmware;
  const wayMm = mechanics.toSwitchMm(axis);
  if (wayMm !== 0) {
    stepper.add({
      deltaMm: { ...allAxes(0), [axis]: wayMm },
      trapezoid: planTrapezoid(Math.abs(wayMm), settings.homingSpeedMmS, firmware.accelerationMmS2[axis]),
      homing: true,
      register: position.logical(firmware.registerAxis),
      feedMm: position.logical('E'),
    });
    yield motionEnded(firmware);
  }
  if (!mechanics.switchPressed(axis)) return false;
  position.setHomed(axis);
  stepper.presentMm[axis] = position.nativeMm[axis];
  return true;
}

function* home(firmware: Firmware, command: Command): Run {
  if (firmware.state !== 'running') return;
  yield motionEnded(firmware);
  const named = LINEAR_AXES.filter((axis) => command.words.has(axis));
  const axes = named.length > 0 ? named : LINEAR_AXES;
  for (const axis of axes) {
    const found = yield* homeAxis(firmware, axis);
    if (!found) {
      firmware.send('Error:Homing Failed');
      firmware.kill();
      return;
    }
  }
  firmware.sinks.tally({ kind: 'homed', axes: [...axes] }, firmware.nowMs);
  if (firmware.family.tellsSteps) firmware.send(positionText(firmware));
}

/** What gives places their names. */
export const positionCommands: Commands = {
  G28: home,
  G92: (firmware, command) => atOnce(() => rename(firmware, command)),
  M114: (firmware) => atOnce(() => firmware.send(positionText(firmware))),
};
