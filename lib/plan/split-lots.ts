/** The register of a rig counts to 9,999 (design.md 5). */
export const PIECES_MOST_OF_REGISTER = 9999;

export interface LotLimits {
  /** The workshop's own: the most pieces that anybody wants in one bag. */
  workshopMost: number;
  lengthMm: number;
  /** The longest length of this wire on any spool, in mm; null when there is none to go by. */
  longestSpoolMm: number | null;
  /** Wire set aside for trims, in mm. */
  trimMm: number;
}

/** The most pieces one lot may have, at least 1: never more than the register counts or one spool gives. */
export function lotPiecesMost(limits: LotLimits): number {
  const { workshopMost, lengthMm, longestSpoolMm, trimMm } = limits;
  const spool = longestSpoolMm === null ? Infinity : Math.floor((longestSpoolMm - trimMm) / lengthMm);
  return Math.max(1, Math.min(workshopMost, PIECES_MOST_OF_REGISTER, spool));
}

/**
 * Splits pieces into as few lots as `most` allows, as even as can be: 1000 at most 400 gives 334, 333, 333. No pieces
 * give no lot. The sizes always add up to `pieces`.
 */
export function splitPieces(pieces: number, most: number): number[] {
  if (pieces <= 0) return [];
  const lots = Math.ceil(pieces / most);
  const least = Math.floor(pieces / lots);
  const larger = pieces - least * lots;
  return Array.from({ length: lots }, (_, index) => (index < larger ? least + 1 : least));
}
