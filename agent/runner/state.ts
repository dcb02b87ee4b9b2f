import type { HoldReason } from '@/lib/fleet/run';
import type { Profile } from '@/lib/program/profile';
import type { ProgramPart, ProgramStep, ReadProgram } from '@/lib/program/steps';
import type { RunProgram } from '@/lib/protocol/pairing';
import type { Firmware } from '@/lib/protocol/report';
import type { Signals } from '@/lib/protocol/signals';

/** What a run is, without its text. */
export type RunOrderHeld = Omit<RunProgram, 'program' | 'profile'>;

/** The next line to send: `index` within the part; `piece` is 0 outside of pieces. */
export interface Cursor {
  readonly part: ProgramPart;
  readonly piece: number;
  readonly index: number;
}

/** What a run becomes when the rig is known to stand still. */
export type After =
  | { to: 'paused'; personId: string | null }
  | { to: 'held'; reason: HoldReason; note: string }
  | { to: 'ended'; personId: string | null }
  | { to: 'complete' };

export type RunMode = 'holding' | 'moving' | 'settling' | 'paused' | 'held' | 'ended';

export interface Run {
  readonly order: RunOrderHeld;
  readonly program: ReadProgram;
  readonly mode: RunMode;
  readonly cursor: Cursor;
  /** Pieces that the rig counted, or a person did. */
  readonly cut: number;
  /** The piece whose cut was commanded and is not confirmed. */
  readonly openCut: number | null;
  /** The open piece that only a person can settle. */
  readonly doubt: number | null;
  /** The register was written since the last homing, so that what it shows can be trusted. */
  readonly registered: boolean;
  /** The cut axis at standby in steps, learnt after homing. */
  readonly standbyCount: number | null;
  readonly mustHome: boolean;
  readonly measureAgain: boolean;
  /** The count at which the run waits for the first pieces to be measured. */
  readonly measureAt: number | null;
  readonly pause: { personId: string | null } | null;
  readonly stop: { personId: string | null } | null;
  readonly after: After | null;
  readonly hold: HoldReason | null;
  /** Where the rig stands is to be asked before anything else. */
  readonly unknown: boolean;
  /** What the firmware refused since the last piece counted. */
  readonly refusal: string | null;
  /** How often the line at the cursor was said again because its answer did not show that it was done. */
  readonly saidAgain: number;
  /** When the motion that closed the jaws had ended, epoch ms. */
  readonly jawsClosedMs: number | null;
  /** Since when it stands still with its steppers on, epoch ms; null: moving, or let go already. */
  readonly stillSinceMs: number | null;
}

/** Why a line is in flight; its answer means something else for each. */
export type Purpose =
  | { for: 'step'; cursor: Cursor; step: ProgramStep }
  | { for: 'settle'; stage: SettleStage }
  | { for: 'display'; text: string }
  | { for: 'switches' }
  | { for: 'heaters' }
  | { for: 'let-go' };

/** `await`: until motion ends. `ask`: where it stands. `register`: the open piece is cut, write it down. */
export type SettleStage = 'await' | 'ask' | 'register';

export interface WorkHold {
  readonly personId: string;
  /** Commands to be answered once the rig is known to stand still. */
  readonly answerTo: readonly string[];
}

export interface RigState {
  readonly rigId: string;
  readonly profile: Profile;
  readonly port: 'closed' | 'opening' | 'open' | 'refused';
  readonly portProblem: string | null;
  readonly portClosedMs: number;
  readonly halted: boolean;
  readonly firmware: Firmware | null;
  readonly signals: Signals;
  /** The lowest that the heaters were when this run began to move or went on, °C. */
  readonly coldC: number | null;
  /** When a temperature was last told, epoch ms. */
  readonly heaterToldMs: number;
  readonly polledMs: { readonly switches: number; readonly heaters: number };
  readonly outstanding: Purpose | null;
  readonly settle: SettleStage | null;
  readonly fence: number;
  readonly taken: readonly string[];
  readonly challenge: string;
  readonly presence: { readonly code: string; readonly madeMs: number; readonly wrong: number } | null;
  /** What the display was last given; null: nothing since the port opened. */
  readonly displayShown: string | null;
  /** `show-code` commands that are answered when the display has the code. */
  readonly showing: readonly string[];
  readonly workHold: WorkHold | null;
  /** Take-program commands whose program is on its way. */
  readonly fetching: readonly string[];
  readonly run: Run | null;
  /** Lines of the firmware that went into the journal in the minute that began at `sinceMs`. */
  readonly said: { readonly sinceMs: number; readonly count: number };
}

/** Nothing read yet: `unknown` where something is fitted. */
export function unreadSignals({ fitted }: Profile): Signals {
  return {
    guard: { reading: fitted.guardSwitch ? 'unknown' : 'not fitted' },
    wire: { reading: fitted.wireSwitch ? 'unknown' : 'not fitted' },
    heater: { reading: fitted.heater ? 'unknown' : 'not fitted' },
  };
}

export const PROGRAM_BEGIN: Cursor = { part: 'preamble', piece: 0, index: 0 };

/** The steps of the part that a cursor is in. */
export function stepsOf(
  program: ReadProgram,
  { part, piece }: Pick<Cursor, 'part' | 'piece'>,
): readonly ProgramStep[] {
  return part === 'piece' ? (program.pieces[piece - 1] ?? []) : program[part];
}

/** The feed coordinate of the whole piece in E units; 0 for a piece that does not exist. */
export function pieceFeedTo(program: ReadProgram, piece: number): number {
  const last = stepsOf(program, { part: 'piece', piece }).findLast((step) => step.kind === 'feed');
  return last?.kind === 'feed' ? last.feedTo : 0;
}
