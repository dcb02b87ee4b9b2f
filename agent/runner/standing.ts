import type { PositionReport } from '@/agent/dialect/position';
import type { Profile } from '@/lib/program/profile';
import { pieceFeedTo, stepsOf, type Cursor, type Run } from './state';

/** Positions are printed with two decimals. */
const PRINTED_MM = 0.011;
const COUNT_STEPS = 2;
const PIECES_PER_TAG = 10_000;

/** Where a run stands by the rig's three numbers (design.md 5). `resume`: the next line; `open`: cut, not registered. */
export type Standing =
  | { is: 'resume'; counted: number; cursor: Cursor }
  | { is: 'open'; piece: number }
  | { is: 'lost' }
  | { is: 'foreign' }
  | { is: 'ahead' }
  | { is: 'nowhere' };

/** Whether a printed coordinate is this one. */
export function near(value: number, target: number): boolean {
  return Math.abs(value - target) <= PRINTED_MM;
}

/** Whether the cut axis is at the cut, by the coordinate and, where it is told, by its steps. */
export function atCut(position: PositionReport, profile: Profile, standbyCount: number | null): boolean {
  const { axis, cutMm, standbyMm, stepsPerMm } = profile.cutAxis;
  if (!near(position[axis], cutMm)) return false;
  if (!position.count || standbyCount === null) return true;
  const wanted = standbyCount + (cutMm - standbyMm) * stepsPerMm;
  return Math.abs(position.count[axis] - wanted) <= COUNT_STEPS;
}

/** Whether the cut axis is at standby, by its coordinate. */
export function atStandby(position: PositionReport, { cutAxis }: Profile): boolean {
  return near(position[cutAxis.axis], cutAxis.standbyMm);
}

/** Whether the feed coordinate is that of the whole piece, in E units. */
export function fedWhole(position: PositionReport, run: Run, piece: number): boolean {
  return near(position.E, pieceFeedTo(run.program, piece));
}

/** The count that the register shows, or why it shows none of this run. */
function registerOf(run: Run, profile: Profile, position: PositionReport): number | 'lost' | 'foreign' {
  if (profile.registerAxis === null) return run.cut;
  const register = Math.round(position[profile.registerAxis]);
  if (register === 0) return 'lost';
  const tag = Math.floor(register / PIECES_PER_TAG);
  return tag === run.order.tag ? register % PIECES_PER_TAG : 'foreign';
}

function resumeAt(
  run: Run,
  counted: number,
  found: (kind: string, feedTo: number) => boolean,
  piece: number,
): Standing {
  const index = stepsOf(run.program, { part: 'piece', piece }).findIndex((step) =>
    found(step.kind, step.kind === 'feed' ? step.feedTo : 0),
  );
  return index < 0 ? { is: 'nowhere' } : { is: 'resume', counted, cursor: { part: 'piece', piece, index } };
}

function standingAtStandby(run: Run, counted: number, position: PositionReport): Standing {
  const piece = counted + 1;
  if (fedWhole(position, run, piece)) return resumeAt(run, counted, (kind) => kind === 'cut', piece);
  if (position.E < -PRINTED_MM || position.E > pieceFeedTo(run.program, piece)) return { is: 'nowhere' };
  return resumeAt(run, counted, (kind, feedTo) => kind === 'feed' && feedTo > position.E + PRINTED_MM, piece);
}

/** Reads where a registered run stands after `M400` and `M114`; the piece is counted by the register, not by us. */
export function whereStands(run: Run, profile: Profile, position: PositionReport): Standing {
  const counted = registerOf(run, profile, position);
  if (counted === 'lost' || counted === 'foreign') return { is: counted };
  if (counted !== run.cut && !(counted === run.cut + 1 && run.openCut === counted)) return { is: 'ahead' };
  const complete = counted === run.order.pieces && near(position.E, 0);
  // Opening the jaws and parking may both be said again; only closed jaws are opened first.
  if (complete && !atCut(position, profile, run.standbyCount)) {
    return { is: 'resume', counted, cursor: { part: 'end', piece: 0, index: 0 } };
  }
  if (atStandby(position, profile)) return standingAtStandby(run, counted, position);
  if (!atCut(position, profile, run.standbyCount)) return { is: 'nowhere' };
  if (near(position.E, 0) && counted > 0) {
    return resumeAt(run, counted, (kind) => kind === 'standby', counted);
  }
  const open = counted === run.cut && run.openCut === counted + 1 && fedWhole(position, run, counted + 1);
  return open ? { is: 'open', piece: counted + 1 } : { is: 'nowhere' };
}
