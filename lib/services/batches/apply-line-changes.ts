import { eq, inArray, sql } from 'drizzle-orm';
import { batchLines, lots } from '@/db/schema/batches';
import type { ChangedLine } from '@/lib/schemas/batches';
import type { ServiceContext } from '../context';
import { insertLines } from './insert-batch';
import type { LockedLine } from './standing-lines';

/** Writes changed lines at their new places, in one statement. */
async function updateLines(
  ctx: ServiceContext,
  batchId: string,
  lines: readonly (ChangedLine & { position: number })[],
): Promise<void> {
  // Two lines may change places, and no two may ever share one: all step aside first.
  await ctx.db
    .update(batchLines)
    .set({ position: sql`-${batchLines.position}` })
    .where(eq(batchLines.batchId, batchId));
  await ctx.db.execute(sql`
    update batch_lines b set
      position = c.position, label = c.label, wire_id = c."wireId", length_mm = c."lengthMm",
      tolerance_minus_mm = c."toleranceMinusMm", tolerance_plus_mm = c."tolerancePlusMm", pieces = c.pieces
    from json_to_recordset(${JSON.stringify(lines)}::json) as c(
      id uuid, position int, label text, "wireId" uuid, "lengthMm" numeric,
      "toleranceMinusMm" numeric, "tolerancePlusMm" numeric, pieces int)
    where b.id = c.id and b.batch_id = ${batchId}`);
}

/** Lines with a history stay, empty and behind the others; the rest is erased with its lots. */
async function removeLines(
  ctx: ServiceContext,
  gone: readonly LockedLine[],
  position: number,
): Promise<void> {
  const erased = gone.filter((line) => !line.hasHistory).map(({ id }) => id);
  if (erased.length > 0) {
    await ctx.db.delete(lots).where(inArray(lots.lineId, erased));
    await ctx.db.delete(batchLines).where(inArray(batchLines.id, erased));
  }
  const kept = gone.filter((line) => line.hasHistory);
  for (const [index, { id }] of kept.entries()) {
    await ctx.db
      .update(batchLines)
      .set({ pieces: 0, position: position + index })
      .where(eq(batchLines.id, id));
    await ctx.db
      .update(lots)
      .set({ state: 'withdrawn', pieces: 0, waitingReason: '' })
      .where(sql`${lots.lineId} = ${id} and ${lots.state} = 'waiting'`);
  }
}

/** Brings a batch's lines to what was asked for, in that order; part of the caller's transaction. */
export async function applyLineChanges(
  ctx: ServiceContext,
  batchId: string,
  lines: readonly ChangedLine[],
  standing: ReadonlyMap<string, LockedLine>,
): Promise<void> {
  const placed = lines.map((line, index) => ({ ...line, position: index + 1 }));
  await updateLines(
    ctx,
    batchId,
    placed.filter(({ id }) => id !== null),
  );
  const kept = new Set(lines.map(({ id }) => id));
  const gone = [...standing.values()].filter(({ id }) => !kept.has(id));
  await removeLines(ctx, gone, lines.length + 1);
  for (const line of placed.filter(({ id }) => id === null)) {
    await insertLines(ctx, batchId, [line], line.position);
  }
}
