/** One closing of a rig's jaws, by its tally; `register` is 0 on a rig without one. Times are ms since 1970. */
export interface JawsClosed {
  atMs: number;
  register: number;
}

/** One message of a rig as somebody got it: where the run stood, and when that was said and got. */
export interface Sighting {
  atMs: number;
  /** When the server read what it sent. */
  readAtMs: number;
  runId: string;
  cut: number;
  /** When the agent says that the last piece was cut; null before the first. */
  lastPieceAtMs: number | null;
}

/** One piece on its way from the jaws to the screen; null: it was not seen at all. */
export interface PieceSeen {
  runId: string;
  piece: number;
  closedAtMs: number;
  seen: Sighting | null;
}

const REGISTER_PER_TAG = 10_000;

function requireRegister({ register }: JawsClosed, piece: number): void {
  // The register still counts the piece before: it is written after the jaws have closed.
  if (register === 0 || register % REGISTER_PER_TAG === piece - 1) return;
  throw new Error(`Tally and screen do not agree: register ${register} at piece ${piece}`);
}

/**
 * Finds for each closing of one rig when somebody first saw that many pieces. Runs follow one another, the first
 * closing of each is its trim. `closings` begins with the first run's; `sightings` are in order and may skip counts.
 * @throws Error where the rig's register says another piece
 */
export function matchPieces(closings: readonly JawsClosed[], sightings: readonly Sighting[]): PieceSeen[] {
  const runIds = [...new Set(sightings.map(({ runId }) => runId))];
  const pieces: PieceSeen[] = [];
  let at = 0;
  for (const [index, runId] of runIds.entries()) {
    const own = sightings.filter((sighting) => sighting.runId === runId);
    const isLast = index === runIds.length - 1;
    const most = Math.max(...own.map(({ cut }) => cut));
    const closed = closings.slice(at + 1, isLast ? undefined : at + 1 + most);
    at += 1 + closed.length;
    let next = 0;
    for (const [before, closing] of closed.entries()) {
      const piece = before + 1;
      requireRegister(closing, piece);
      while (next < own.length && (own[next]?.cut ?? 0) < piece) next += 1;
      pieces.push({ runId, piece, closedAtMs: closing.atMs, seen: own[next] ?? null });
    }
  }
  return pieces;
}
