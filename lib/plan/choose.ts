import { waitingReason } from './waiting-reason';
import { lengthFits, type LotToGive, type RigToFill, spoolFits } from './work';

export interface Gift {
  lotId: string;
  rigId: string;
}

export interface Choice {
  gifts: Gift[];
  /** Why each other lot waits, for a person; by lot. */
  reasons: Map<string, string>;
}

const timeOf = (date: Date | null): number => date?.getTime() ?? Infinity;

function compareNumbers(a: number, b: number): number {
  return a === b ? 0 : a < b ? -1 : 1;
}

/** Whose turn is first: priority, then due time (none is last), then time of queueing, then the numbers. */
export function compareTurns(a: LotToGive, b: LotToGive): number {
  return (
    compareNumbers(a.priority, b.priority) ||
    compareNumbers(timeOf(a.dueAt), timeOf(b.dueAt)) ||
    compareNumbers(a.queuedAt.getTime(), b.queuedAt.getTime()) ||
    compareNumbers(a.order[0], b.order[0]) ||
    compareNumbers(a.order[1], b.order[1]) ||
    compareNumbers(a.order[2], b.order[2])
  );
}

/** Whether the rig's wire, profile and spool suit the lot; whether it is busy is another question. */
export function fits(lot: LotToGive, rig: RigToFill): boolean {
  return rig.wireId === lot.wireId && lengthFits(lot, rig) && spoolFits(lot, rig);
}

/** The rig whose spool is nearest its end goes first, so that begun spools are used up; then bench order. */
function bestRig(lot: LotToGive, rigs: readonly RigToFill[]): RigToFill | undefined {
  return rigs
    .filter((rig) => rig.busy === null && fits(lot, rig))
    .toSorted((a, b) => a.spoolLeftMm - b.spoolLeftMm || a.benchOrder - b.benchOrder)[0];
}

/**
 * Gives waiting lots to free rigs: each rig at most one lot, each lot at most one rig, first whose turn is first.
 * Lots that get none come back with the reason. `spokenTime` writes a moment as a person reads it, such as `14:20`.
 */
export function chooseGifts(
  lots: readonly LotToGive[],
  rigs: readonly RigToFill[],
  spokenTime: (at: Date) => string,
): Choice {
  const gifts: Gift[] = [];
  const reasons = new Map<string, string>();
  let standing = [...rigs];
  for (const lot of lots.toSorted(compareTurns)) {
    const rig = bestRig(lot, standing);
    if (rig === undefined) {
      reasons.set(lot.lotId, waitingReason(lot, standing, spokenTime));
      continue;
    }
    gifts.push({ lotId: lot.lotId, rigId: rig.rigId });
    const taken: RigToFill = { ...rig, busy: { doing: 'ready to start', freeAt: null } };
    standing = standing.map((one) => (one.rigId === rig.rigId ? taken : one));
  }
  return { gifts, reasons };
}
