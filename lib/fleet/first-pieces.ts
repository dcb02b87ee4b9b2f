/** What is known of a run's first pieces. */
export interface FirstPiecesFacts {
  /** The agent holds after so many pieces since the start, and since each homing; 0: never. */
  firstPieces: number;
  cut: number;
  measuredThrough: number;
  heldForThem: boolean;
}

/** The pieces of the latest group of first pieces, in order; empty unless the run is held for them. */
export function firstPiecesGroup(facts: FirstPiecesFacts): number[] {
  if (!facts.heldForThem) return [];
  const from = Math.max(1, facts.cut - facts.firstPieces + 1);
  return Array.from({ length: Math.max(0, facts.cut - from + 1) }, (_, index) => from + index);
}

/** Pieces whose lengths must be entered before the run may go on. */
export function piecesToMeasure(facts: FirstPiecesFacts): number[] {
  return firstPiecesGroup(facts).filter((piece) => piece > facts.measuredThrough);
}

/** Whether a length is within the line's tolerance; rounding of the unit (µm) never decides. */
export function withinTolerance(
  lengthMm: number,
  line: { lengthMm: number; toleranceMinusMm: number; tolerancePlusMm: number },
): boolean {
  const offMm = Math.round((lengthMm - line.lengthMm) * 1000) / 1000;
  return offMm >= -line.toleranceMinusMm && offMm <= line.tolerancePlusMm;
}
