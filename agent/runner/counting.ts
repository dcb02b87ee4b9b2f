import type { PositionReport } from '@/agent/dialect/position';
import type { Reply } from '@/agent/dialect/reply';
import { pieceLengthMm } from './measures';
import { near } from './standing';
import { stepsOf, type Cursor, type Run } from './state';
import type { Turn } from './turn';

/** A line's answer: `sure` is false when the firmware has the line and what it answered may be lost. */
export interface Answered {
  sure: boolean;
  replies: readonly Reply[];
}

export function positionIn(replies: readonly Reply[]): PositionReport | null {
  const told = replies.findLast((reply) => reply.kind === 'position');
  return told?.kind === 'position' ? told.position : null;
}

/**
 * Whether the rig shows this number in its register and a feed of zero, which the same line sets: a line may arrive
 * with a digit too many. Without a register its ok is all there is.
 */
export function shows(turn: Turn, register: number | null, { sure, replies }: Answered): boolean {
  const axis = turn.state.profile.registerAxis;
  const position = positionIn(replies);
  if (position && !near(position.E, 0)) return false;
  return axis === null || register === null ? sure : position?.[axis] === register;
}

/** Law 1: counted once, and only when the rig said so. */
export function countPiece(turn: Turn, piece: number): void {
  const { run, rigId } = turn.state;
  if (!run || piece !== run.cut + 1) return;
  turn.setRun({ cut: piece, openCut: null, refusal: null });
  turn.event({
    kind: 'piece-cut',
    rigId,
    runId: run.order.runId,
    piece,
    wireMm: pieceLengthMm(run),
    jawsClosedAt: new Date(run.jawsClosedMs ?? turn.nowMs).toISOString(),
  });
}

/** Whether the jaws were sent on the trim and the motion that shuts them is not known to have ended. */
export function isTrimCut({ program }: Run, cursor: Cursor): boolean {
  if (cursor.part !== 'trim') return false;
  return stepsOf(program, cursor)[cursor.index - 1]?.kind === 'cut';
}

/** The trim's wire is charged when the motion that cut it has ended. */
export function noteTrim(turn: Turn): void {
  const { run, rigId, profile } = turn.state;
  if (!run) return;
  turn.event({ kind: 'trim-cut', rigId, runId: run.order.runId, wireMm: profile.feed.trimMm });
}
