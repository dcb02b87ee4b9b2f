import type { RigReport, RunnerState } from '@/lib/protocol/report';
import type { RigState, Run } from './state';

function movingState({ cursor, pause }: Run): RunnerState {
  if (pause) return 'pausing';
  if (cursor.part === 'preamble' || cursor.part === 'home') return 'homing';
  return cursor.part === 'trim' || cursor.part === 'register' ? 'trimming' : 'cutting';
}

/** What the run does, in the words of the protocol. */
export function runnerState(run: Run | null): RunnerState {
  switch (run?.mode) {
    case undefined:
      return 'idle';
    case 'holding':
      return 'holding-program';
    case 'moving':
      return movingState(run);
    case 'settling':
      return run.stop ? 'stopping' : 'pausing';
    case 'paused':
      return 'paused';
    case 'held':
      return run.stop ? 'stopping' : 'held';
    case 'ended':
      return 'tray-full';
  }
}

/** What the server is told of a rig. */
export function reportOf(state: RigState): RigReport {
  const { run, firmware } = state;
  return {
    rigId: state.rigId,
    // A halted board takes no line until its reset: as good as none.
    port: state.halted ? 'refused' : state.port,
    portProblem: state.portProblem,
    firmware,
    signals: state.signals,
    runner: runnerState(run),
    runId: run?.order.runId ?? null,
    programSha256: run?.order.programSha256 ?? null,
    piecesCut: run?.cut ?? 0,
    holdReason: run?.mode === 'held' ? run.hold : null,
    workHold: state.workHold !== null,
    challenge: state.challenge,
    fence: state.fence,
    virtualDisplay: firmware?.virtual ? state.displayShown : null,
  };
}
