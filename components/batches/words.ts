import type { BatchState } from '@/lib/fleet/batch-state';
import type { LotDto } from '@/lib/schemas/batches';

export const BATCH_STATE_WORDS: Record<BatchState, string> = {
  draft: 'Draft',
  queued: 'Queued',
  cutting: 'Cutting',
  done: 'Done',
  withdrawn: 'Withdrawn',
};

/** `1 piece`, `12 lots`. */
export function counted(count: number, one: string, many = `${one}s`): string {
  return `${count.toLocaleString('en-GB')} ${count === 1 ? one : many}`;
}

/** Where one lot is and what became of it. */
export function lotWords(lot: LotDto): string {
  const rig = lot.rigName ?? 'a rig';
  switch (lot.state) {
    case 'waiting':
      return lot.waitingReason || 'Waits for its turn.';
    case 'given':
      return `On ${rig}, ready to start.`;
    case 'running':
      return `On ${rig}, ${lot.cut} cut.`;
    case 'cut':
      return `In the tray of ${rig}, ${lot.cut} cut.`;
    case 'bagged':
      return `In bag ${lot.bagCode ?? ''}: ${counted(lot.bagged ?? 0, 'piece')}, cut on ${rig}.`;
    case 'withdrawn':
      return lot.cut > 0 ? `Withdrawn, ${lot.cut} cut before.` : 'Withdrawn.';
  }
}

/** Whether a batch's due time has passed; only while something of it is left to do. */
export function isOverdue(batch: { dueAt: string | null; state: BatchState }, nowMs: number): boolean {
  const open = batch.state === 'draft' || batch.state === 'queued' || batch.state === 'cutting';
  return open && batch.dueAt !== null && Date.parse(batch.dueAt) < nowMs;
}
