import type { ErrorCode } from '@/lib/errors';
import { COMMAND_MAX_AGE_MS } from '@/lib/protocol/version';
import type { MovingCommand } from '@/lib/protocol/commands';
import { isFresh } from './signals';
import type { RigState, Run } from './state';

/** A shown code is good for so long. */
export const PRESENCE_CODE_MS = 120_000;
/** An acknowledgement of the notes is good for one shift and its overtime. */
const ACKNOWLEDGED_MAX_MS = 16 * 3_600_000;
/** Clocks of server and agent may differ by this after the skew is taken out. */
const CLOCK_SLACK_MS = 5_000;

type Check = (state: RigState, command: MovingCommand, nowMs: number) => ErrorCode | null;

const age: Check = (_state, command, nowMs) => {
  const ageMs = nowMs - Date.parse(command.issuedAt);
  return ageMs > COMMAND_MAX_AGE_MS || ageMs < -CLOCK_SLACK_MS ? 'command-late' : null;
};

const replay: Check = ({ taken }, { id }) => (taken.includes(id) ? 'command-replayed' : null);

const fence: Check = (state, command) => (command.fence < state.fence ? 'fence-old' : null);

const challenge: Check = (state, command) =>
  command.challenge === state.challenge ? null : 'challenge-wrong';

const connected: Check = ({ port, halted }) => (port === 'open' && !halted ? null : 'rig-not-connected');

function stepAllowed(run: Run, kind: MovingCommand['kind']): boolean {
  if (kind === 'start-run') return run.mode === 'holding';
  return (run.mode === 'paused' || run.mode === 'held') && run.stop === null;
}

const program: Check = ({ run }, command) => {
  if (!run) return 'program-not-held';
  if (run.mode === 'ended') return 'tray-not-cleared';
  if (run.order.runId !== command.runId) return 'program-not-held';
  if (command.kind === 'start-run' && run.order.programSha256 !== command.programSha256)
    return 'program-not-held';
  if (run.doubt !== null) return 'doubt-open';
  if (run.unknown || !stepAllowed(run, command.kind)) return 'illegal-step';
  // What was cut is not known any more: this run can only be stopped, and its tray counted.
  return run.hold === 'journal-damaged' ? 'illegal-step' : null;
};

const workHold: Check = (state, { conditions }) =>
  state.workHold || conditions.workHold ? 'work-hold' : null;

const tray: Check = (_state, { conditions }) => (conditions.trayCleared ? null : 'tray-not-cleared');

const notes: Check = (_state, { conditions }, nowMs) => {
  const ageMs = nowMs - Date.parse(conditions.acknowledgedAt);
  return ageMs > ACKNOWLEDGED_MAX_MS || ageMs < -CLOCK_SLACK_MS ? 'notes-not-acknowledged' : null;
};

const presence: Check = (state, command, nowMs) => {
  if (!state.profile.fitted.display) return null;
  if (command.presenceCode === null || !state.presence) return 'presence-missing';
  if (nowMs - state.presence.madeMs > PRESENCE_CODE_MS) return 'presence-missing';
  return command.presenceCode === state.presence.code ? null : 'presence-wrong';
};

const guard: Check = ({ signals }, _command, nowMs) => {
  if (signals.guard.reading === 'not fitted') return null;
  return signals.guard.reading === 'closed' && isFresh(signals.guard, nowMs) ? null : 'guard-open';
};

const heater: Check = ({ signals }, _command, nowMs) => {
  if (signals.heater.reading === 'not fitted') return null;
  return signals.heater.reading === 'off' && isFresh(signals.heater, nowMs) ? null : 'heater-on';
};

/** Wire still to be fed by the run, with the trim that goes before it, mm. */
function wireLeftToCutMm({ profile }: RigState, run: Run): number {
  const trims = run.mode === 'holding' || run.mustHome ? 1 : 0;
  return (run.order.pieces - run.cut) * run.order.lengthMm + trims * profile.feed.trimMm;
}

const wire: Check = (state, { conditions }, nowMs) => {
  const { run, signals } = state;
  if (!run || conditions.loadedWireId !== run.order.wireId) return 'wrong-wire';
  if (signals.wire.reading !== 'not fitted') {
    if (signals.wire.reading !== 'present' || !isFresh(signals.wire, nowMs)) return 'wire-missing';
  }
  const leftMm = conditions.spoolLeftMm ?? 0;
  return leftMm < wireLeftToCutMm(state, run) ? 'wire-short' : null;
};

const CHECKS: readonly Check[] = [
  replay,
  age,
  fence,
  challenge,
  connected,
  program,
  workHold,
  tray,
  notes,
  guard,
  heater,
  wire,
  presence,
];

/**
 * Law 5 at the rig: why a command that may move something is refused, or null. `nowMs` is the server's time as the
 * agent reckons it for the ages of what the server dated, `localMs` the agent's own for what it read itself.
 */
export function refuseMoving(
  state: RigState,
  command: MovingCommand,
  nowMs: number,
  localMs: number = nowMs,
): ErrorCode | null {
  for (const check of CHECKS) {
    const ofServer = check === age || check === notes;
    const code = check(state, command, ofServer ? nowMs : localMs);
    if (code) return code;
  }
  return null;
}
