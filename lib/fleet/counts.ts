/**
 * How pieces are counted; the one place that says so (laws 1 and 3).
 *
 * - `cut`: pieces whose cut is a settled fact: the highest number the rig's own register confirmed, and a doubted
 *   piece that a named person counted. It never goes down, and never above the run's pieces.
 * - A doubt that is open is in none of the numbers: the run names it (`doubtPiece`) and holds until it is answered.
 * - A doubt that was discarded is in none of them either: the rig cuts that number again, register and count agree,
 *   and the doubted wire is thrown away. The event keeps who said so.
 * - `scrapped`, `sampled`, `doubted`: counted pieces that do not go into the bag, as sums of `piece_entries`.
 * - `surplus`: pieces reported after the run was taken from the rig, or beyond its order. Never in the bag.
 */
export interface PieceSums {
  scrapped: number;
  sampled: number;
  doubted: number;
}

/** Pieces for the bag: the count cut less what was thrown away, measured away or doubted. */
export function baggedOf(cut: number, sums: PieceSums): number {
  return cut - sums.scrapped - sums.sampled - sums.doubted;
}

/** Whether the sums are possible for a run that cut so many: none below zero, and no bag below zero. */
export function sumsHold(cut: number, sums: PieceSums): boolean {
  const each = [sums.scrapped, sums.sampled, sums.doubted, baggedOf(cut, sums)];
  return each.every((pieces) => pieces >= 0);
}
