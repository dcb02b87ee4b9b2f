/** What names a bag before and after it exists: the batch's number, the line's place in it, the lot, the run. */
export interface BagNames {
  batchNumber: number;
  linePosition: number;
  lotNumber: number;
  runId: string;
}

const PATTERN = /^EW-(\d{1,9})-(\d{1,6})-(\d{1,6})-([0-9A-F]{4})$/;

/** The four digits guard against a code typed wrong: they are the run's, not a bag's number. */
function runDigits(runId: string): string {
  return runId.slice(0, 4).toUpperCase();
}

/** The code on a bag's label, such as `EW-12-3-1-9F0C`: letters, digits and hyphens, as any barcode holds. */
export function bagCode({ batchNumber, linePosition, lotNumber, runId }: BagNames): string {
  return `EW-${batchNumber}-${linePosition}-${lotNumber}-${runDigits(runId)}`;
}

/** The numbers in a scanned code; null when it is none of ours. */
export function readBagCode(code: string): (Omit<BagNames, 'runId'> & { runDigits: string }) | null {
  const match = PATTERN.exec(code.trim().toUpperCase());
  if (!match) return null;
  const [, batch, line, lot, digits] = match;
  return {
    batchNumber: Number(batch),
    linePosition: Number(line),
    lotNumber: Number(lot),
    runDigits: digits ?? '',
  };
}
