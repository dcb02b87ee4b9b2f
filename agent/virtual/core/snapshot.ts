import { AXES, LINEAR_AXES, type Axes } from '../mechanics/axes';
import type { RigCore } from './rig-core';

/** @returns the rig's whole state in truth: what a person standing beside it would see, and what the board believes. */
export function snapshotOf(core: RigCore) {
  const { firmware, mechanics, settings } = core;
  const { position, stepper, memory, receiver } = firmware;
  const logicalMm = Object.fromEntries(AXES.map((axis) => [axis, position.logical(axis)]));
  return {
    rig: settings.name,
    mechanicalMs: core.nowMs,
    portOpen: core.portOpen,
    board: firmware.state,
    display: memory.displayText,
    lastNumber: receiver.lastNumber,
    moving: !stepper.idle,
    motionMs: stepper.motionMs,
    commandedMm: logicalMm as unknown as Axes,
    presentMm: { ...stepper.presentMm },
    trueMm: { ...mechanics.positionMm },
    homed: { ...position.homed },
    steppersOn: LINEAR_AXES.filter((axis) => mechanics.power.energised[axis]),
    guardOpen: mechanics.power.guardOpen,
    motorPower: mechanics.power.supplied,
    jawsShut: mechanics.jaws.shut,
    wire: {
      present: mechanics.wire.present,
      jammed: mechanics.wire.jammed,
      spoolMm: mechanics.wire.spoolMm,
      pastJawsMm: mechanics.wire.pastJawsMm,
    },
    blade: { cuts: mechanics.blade.cuts, uncutChance: mechanics.blade.chance },
    heater: { temperatureC: mechanics.heater.temperatureC, targetC: mechanics.heater.targetC },
    counts: { ...mechanics.counts },
  };
}

export type Snapshot = ReturnType<typeof snapshotOf>;
