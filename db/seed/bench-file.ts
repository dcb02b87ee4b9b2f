import { join } from 'node:path';
import type { DemoRig } from './demo/rigs';
import { DEMO_SPOOLS } from './demo/stock';

/** A Unix socket's path holds 107 bytes; a rig below a longer folder goes without its faults, not without a port. */
const SOCKET_PATH_BYTES_MAX = 107;

/**
 * The file of the demo's virtual rigs: each has exactly what its profile says is fitted. `speed` is motion over a real
 * rig's.
 */
export function benchFile(folder: string, speed: number, rigs: readonly DemoRig[]): object {
  return { rigs: rigs.map((rig, index) => ({ ...virtualRig(folder, rig, index), speed })) };
}

function virtualRig(folder: string, { name, profile, mechanics }: DemoRig, index: number): object {
  const control = join(folder, 'control', name);
  const hasRoom = Buffer.byteLength(control) <= SOCKET_PATH_BYTES_MAX;
  return {
    name,
    seed: index + 1,
    tty: join(folder, 'tty', name),
    tally: join(folder, 'tally', `${name}.jsonl`),
    ...(hasRoom ? { control } : {}),
    resetOnOpen: profile.serial.resetsOnOpen,
    registerAxis: profile.registerAxis ?? 'Y',
    firmware: firmwareOf(profile),
    mechanics: {
      cutAxis: profile.cutAxis.axis,
      wirePerUnit: (1 + mechanics.feedExcess) / profile.feed.feedPerMm,
      slip: { mean: 0, sd: mechanics.slipSd },
      spoolMm: (DEMO_SPOOLS[index]?.lengthM ?? 100) * 1000,
      guardCutsMotorPower: profile.fitted.guardCutsMotorPower,
    },
  };
}

function firmwareOf({ cutAxis, fitted }: DemoRig['profile']): object {
  return {
    emergencyParser: fitted.emergencyParser,
    display: fitted.display,
    beeper: fitted.beeper,
    guardSwitch: fitted.guardSwitch?.endstop ?? null,
    guardClosedReads: fitted.guardSwitch?.closedReads ?? 'TRIGGERED',
    wireSwitch: fitted.wireSwitch,
    stepsPerMm: { [cutAxis.axis]: cutAxis.stepsPerMm },
    speedMmS: { [cutAxis.axis]: cutAxis.speedMmS },
    accelerationMmS2: { [cutAxis.axis]: cutAxis.accelerationMmS2 },
  };
}
