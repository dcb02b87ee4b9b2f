import type { RigPageDto } from '@/lib/schemas/floor';
import { acknowledgeNotes } from '@/lib/services/runs/acknowledge-notes';
import type { ContextNow } from './actors';

/** Confirms a rig's notes for a run, unless that person has done so. */
export async function acknowledge(
  now: ContextNow,
  { notes, acknowledged }: RigPageDto,
  runId: string,
): Promise<void> {
  if (acknowledged || !notes) return;
  await acknowledgeNotes({ ctx: now(), input: { runId, notesVersion: notes.version, full: true } });
}
