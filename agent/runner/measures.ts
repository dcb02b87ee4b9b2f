import { stepsOf, type Cursor, type Run } from './state';

/** Wire that one piece takes, mm. */
export function pieceLengthMm(run: Run): number {
  return run.order.lengthMm;
}

/** The longest that motion in flight can last, ms: the longest part that is sent without waiting in between. */
export function motionBoundMs(run: Run | null): number {
  if (!run) return 0;
  const parts: Pick<Cursor, 'part' | 'piece'>[] = [
    { part: 'home', piece: 0 },
    { part: 'trim', piece: 0 },
    { part: 'piece', piece: 1 },
    { part: 'end', piece: 0 },
  ];
  const sums = parts.map((part) =>
    stepsOf(run.program, part).reduce((sum, step) => sum + step.expectedMs, 0),
  );
  return Math.max(0, ...sums);
}
