import type { TallyLine } from '@/agent/virtual/tally';

export type Closing = Extract<TallyLine, { kind: 'closing' }>;

/** What a program asked for, as far as a closing of the jaws can be told by it. */
export interface Order {
  tag: number;
  lengthMm: number;
  feedPerMm: number;
}

const REGISTER_PER_TAG = 10_000;
/** The issue's own bound for a piece of a rig that does not slip. */
const LENGTH_WITHIN_MM = 0.05;
const FEED_WITHIN_MM = 0.02;

/** The piece (from 1) that the jaws were shut for; null for a trim and for another run. */
export function pieceOf(closing: Closing, { tag, lengthMm, feedPerMm }: Order): number | null {
  if (Math.floor(closing.register / REGISTER_PER_TAG) !== tag) return null;
  if (Math.abs(closing.feedMm - lengthMm * feedPerMm) > FEED_WITHIN_MM) return null;
  return (closing.register % REGISTER_PER_TAG) + 1;
}

/** Whether a whole piece of wire fell into the tray. */
export function gaveAPiece({ severed, wireMm }: Closing, { lengthMm }: Order): boolean {
  return severed && Math.abs(wireMm - lengthMm) <= LENGTH_WITHIN_MM;
}

/** The closings of a run's pieces, in order, by piece. */
export function closingsOf(tally: readonly TallyLine[], order: Order): Map<number, Closing[]> {
  const pieces = new Map<number, Closing[]>();
  for (const line of tally) {
    if (line.kind !== 'closing') continue;
    const piece = pieceOf(line, order);
    if (piece !== null) pieces.set(piece, [...(pieces.get(piece) ?? []), line]);
  }
  return pieces;
}

/** How many of the pieces 1 to `cut` lie whole in the tray, as somebody sees who counts and measures them. */
export function wholePieces(tally: readonly TallyLine[], order: Order, cut: number): number {
  const closings = closingsOf(tally, order);
  let whole = 0;
  for (let piece = 1; piece <= cut; piece += 1) {
    if (closings.get(piece)?.some((closing) => gaveAPiece(closing, order))) whole += 1;
  }
  return whole;
}
