import type { Reply } from '@/agent/dialect/reply';
import type { Profile } from '@/lib/program/profile';
import { HEATER_WARM_C, type Signals } from '@/lib/protocol/signals';

/** A reading older than this proves nothing when something is to move. */
export const FRESH_MS = 3_000;

/** Folds the answer of `M119` into the signals; a switch that is fitted and not told becomes unknown. */
export function readSwitches(
  signals: Signals,
  profile: Profile,
  replies: readonly Reply[],
  readAt: string,
): Signals {
  const readings = replies.flatMap((reply) =>
    reply.kind === 'switch' ? [reply] : reply.kind === 'switches' ? reply.told : [],
  );
  const told = new Map(readings.map(({ name, triggered }) => [name, triggered] as const));
  return {
    ...signals,
    guard: readGuard(profile, told, readAt),
    wire: readWire(profile, told, readAt),
  };
}

function readGuard(
  { fitted }: Profile,
  told: ReadonlyMap<string, boolean>,
  readAt: string,
): Signals['guard'] {
  if (!fitted.guardSwitch) return { reading: 'not fitted' };
  const triggered = told.get(fitted.guardSwitch.endstop);
  if (triggered === undefined) return { reading: 'unknown' };
  const closed = triggered === (fitted.guardSwitch.closedReads === 'TRIGGERED');
  return { reading: closed ? 'closed' : 'open', readAt };
}

function readWire({ fitted }: Profile, told: ReadonlyMap<string, boolean>, readAt: string): Signals['wire'] {
  if (!fitted.wireSwitch) return { reading: 'not fitted' };
  const triggered = told.get('filament');
  // On the wire switch TRIGGERED means that wire is there.
  return triggered === undefined
    ? { reading: 'unknown' }
    : { reading: triggered ? 'present' : 'missing', readAt };
}

/** A heater that is so much warmer than when the run began is warming, however cold it still is; °C. */
const HEATER_RISE_C = 20;

/** Folds the answer of `M105` into the signals. `coldC`: what the heaters were when the run began, null without one. */
export function readHeaters(
  signals: Signals,
  profile: Profile,
  replies: readonly Reply[],
  readAt: string,
  coldC: number | null = null,
): Signals {
  if (!profile.fitted.heater) return { ...signals, heater: { reading: 'not fitted' } };
  const told = replies.flatMap((reply) =>
    (reply.kind === 'ok' || reply.kind === 'temperature') && reply.temperature ? [reply.temperature] : [],
  );
  const last = told.at(-1);
  if (!last) return { ...signals, heater: { reading: 'unknown' } };
  const warmAboveC = Math.min(HEATER_WARM_C, (coldC ?? HEATER_WARM_C) + HEATER_RISE_C);
  const reading = last.targetC > 0 ? 'on' : last.actualC > warmAboveC ? 'warm' : 'off';
  return { ...signals, heater: { reading, ...last, readAt } };
}

/** Whether a signal was read within the last 3 s. */
export function isFresh(signal: Signals[keyof Signals], nowMs: number): boolean {
  return 'readAt' in signal && nowMs - Date.parse(signal.readAt) <= FRESH_MS;
}

export type RunningFault = 'guard-open' | 'heater-warm';

/** What the signals say against a run that is going on; the wire is looked at between pieces. */
export function faultOf({ guard, heater }: Signals): RunningFault | null {
  if (guard.reading === 'open') return 'guard-open';
  return heater.reading === 'on' || heater.reading === 'warm' ? 'heater-warm' : null;
}

/**
 * Whether a fault in mid-run is answered with `M112` (protocol.md 5) instead of by sending nothing more. A heater that
 * is switched on is: that switches it off on every build. An opened guard is where the firmware acts on `M112` at
 * once and the guard does not cut the motors' supply itself. A heater that is only warm gets no cooler by it.
 */
export function needsFaultStop(fault: RunningFault, { heater }: Signals, { fitted }: Profile): boolean {
  if (fault === 'heater-warm') return heater.reading === 'on';
  return fitted.emergencyParser && !fitted.guardCutsMotorPower;
}
