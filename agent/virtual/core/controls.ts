import type { ControlOf, ControlRequest } from './control-requests';
import type { RigCore } from './rig-core';
import { snapshotOf } from './snapshot';

/** Requests that concern the rig itself; the cable is the edge's. */
export type CoreRequest = Exclude<ControlRequest, { do: 'usb' }>;

type Verbs = { [Verb in CoreRequest['do']]: (core: RigCore, request: ControlOf<Verb>) => object | void };

const verbs: Verbs = {
  snapshot: (core) => ({ snapshot: snapshotOf(core) }),
  guard: (core, { open }) => core.mechanics.setGuard(open),
  wire: (core, { out }) => core.mechanics.changeWire((wire) => void (wire.out = out)),
  'spool-end': (core) => core.mechanics.changeWire((wire) => void (wire.spoolMm = 0)),
  spool: (core, { mm }) => core.mechanics.changeWire((wire) => wire.loadSpool(mm)),
  slip: (core, { mean, sd }) => void (core.mechanics.wire.slip = { mean, sd }),
  jam: (core, { on }) => void (core.mechanics.wire.jammed = on),
  blade: (core, request) => setBlade(core, request),
  power: (core, { on }) => setPower(core, on),
  'motor-power': (core, { on }) => core.mechanics.setSupply(on),
  reset: (core) => core.firmware.reset('button'),
  'error-stop': (core) => core.firmware.stopOnError(),
  noise: (core, { kind, direction, bytes, probability }) =>
    core.noise[direction].disturb(kind, bytes, probability),
  ok: (core, { fault, count }) => core.answers.spoil(fault, count),
  mute: (core, { ms }) => core.answers.mute(core.nowMs, ms),
  busy: (core, { ms }) => core.firmware.executor.stall(ms * core.settings.speed),
  heater: (core, { warmsToC }) => void (core.mechanics.heater.faultC = warmsToC ?? undefined),
  'hand-move': (core, { axis, mm }) => ({ atMm: core.mechanics.moveByHand(axis, mm) }),
  'hand-place': ({ mechanics }, { axis, atMm }) => ({
    atMm: mechanics.moveByHand(axis, atMm - mechanics.positionMm[axis]),
  }),
};

/** Does one thing to the rig, at its present moment. @returns what the answer carries beside `ok`. */
export function control(core: RigCore, request: CoreRequest): object {
  const verb = verbs[request.do] as (core: RigCore, request: CoreRequest) => object | void;
  return verb(core, request) ?? {};
}

function setBlade(core: RigCore, { state, uncut }: ControlOf<'blade'>): void {
  if (state === 'new') core.mechanics.blade.replace();
  else core.mechanics.blade.fixedChance = uncut;
}

/** Mains off takes logic and motors; on again boots the board. */
function setPower(core: RigCore, on: boolean): void {
  if (on === (core.firmware.state !== 'off')) return;
  core.firmware.sinks.tally({ kind: 'logic-power', on }, core.nowMs);
  core.mechanics.setSupply(on);
  if (on) core.firmware.reset('power');
  else core.firmware.powerDown();
}
