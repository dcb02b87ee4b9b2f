import { createBatch } from '@/lib/services/batches/create-batch';
import type { RigDto } from '@/lib/schemas/floor';
import type { ContextNow } from '@/scripts/hands/actors';

/** Short pieces cut fastest: some 17 a second on the demo's eight rigs. */
export const LENGTH_MM = 25;
/** No demo rig cuts one faster than this. */
const FASTEST_PIECE_MS = 400;
/** The last of the spool is left on it. */
const SPOOL_SHARE = 0.9;

/** Queues one long batch with a line for the wire of each rig, enough for `minutes`. @throws Error without wire */
export async function queueWork(
  scheduler: ContextNow,
  rigs: readonly RigDto[],
  minutes: number,
): Promise<void> {
  const wanted = Math.ceil((minutes * 60_000) / FASTEST_PIECE_MS);
  const lines = rigs.map(({ name, spool }) => {
    if (!spool) throw new Error(`${name} has no spool`);
    const pieces = Math.min(wanted, Math.floor((spool.leftMm * SPOOL_SHARE) / LENGTH_MM));
    if (pieces < wanted) console.log(`${name}: its spool gives only ${pieces} pieces`);
    const tolerance = { toleranceMinusMm: 1, tolerancePlusMm: 3 };
    return { label: name, wireId: spool.wire.id, lengthMm: LENGTH_MM, ...tolerance, pieces };
  });
  const input = { name: 'Bench work', dueAt: null, priority: 1, lines, queue: true };
  await createBatch({ ctx: scheduler(), input });
}
