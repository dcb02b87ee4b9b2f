import type { LiveMessage } from '@/lib/schemas/floor';
import type { Sighting } from './match';

/** What a live message says of a rig's run; null when it says nothing of one. */
export function sightingOf(message: LiveMessage, atMs: number): (Sighting & { rigId: string }) | null {
  if (message.kind !== 'rig' || !message.rig.run) return null;
  const { id: runId, cut, lastPieceAt } = message.rig.run;
  const lastPieceAtMs = lastPieceAt === null ? null : Date.parse(lastPieceAt);
  return { rigId: message.rig.id, atMs, readAtMs: Date.parse(message.at), runId, cut, lastPieceAtMs };
}
