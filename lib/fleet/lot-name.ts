/** What a person calls a lot: the batch, the line, the lot of that line; `Trainer C, A1, lot 2`. */
export function lotName(lot: { batchName: string; lineLabel: string; lotNumber: number }): string {
  return `${lot.batchName}, ${lot.lineLabel}, lot ${lot.lotNumber}`;
}
