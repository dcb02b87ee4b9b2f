import { and, asc, eq, gt, inArray, sql } from 'drizzle-orm';
import { batchLines, lots } from '@/db/schema/batches';
import { adjustLots, type LotChanges } from '@/lib/plan/adjust-lots';
import type { ServiceContext } from '../context';
import { inParts } from './insert-rows';
import { lotSizes } from './lot-sizes';
import type { LockedLine } from './standing-lines';

interface Adjusted {
  lineId: string;
  lastLotNumber: number;
  changes: LotChanges;
}

async function write(ctx: ServiceContext, adjusted: readonly Adjusted[], queuedAt: Date): Promise<void> {
  const resize = adjusted.flatMap(({ changes }) => changes.resize);
  const erase = adjusted.flatMap(({ changes }) => changes.erase);
  const withdraw = adjusted.flatMap(({ changes }) => changes.withdraw);
  const add = adjusted.flatMap(({ lineId, lastLotNumber, changes }) =>
    changes.add.map((pieces, index) => ({ lineId, number: lastLotNumber + 1 + index, pieces, queuedAt })),
  );
  if (resize.length > 0) {
    await ctx.db.execute(sql`
      update lots l set pieces = c.pieces
      from json_to_recordset(${JSON.stringify(resize)}::json) as c(id uuid, pieces int) where l.id = c.id`);
  }
  if (erase.length > 0) await ctx.db.delete(lots).where(inArray(lots.id, erase));
  if (withdraw.length > 0) {
    await ctx.db
      .update(lots)
      .set({ state: 'withdrawn', pieces: 0, waitingReason: '' })
      .where(inArray(lots.id, withdraw));
  }
  await inParts(add, (part) => ctx.db.insert(lots).values(part));
}

/**
 * Makes the waiting lots of a queued batch fit its changed lines: what is cut or on rigs stays as it is, the rest of
 * each line is split anew. Part of the caller's transaction; the database looks that all adds up when it commits.
 */
export async function applyLotChanges(
  ctx: ServiceContext,
  batchId: string,
  standing: ReadonlyMap<string, LockedLine>,
): Promise<void> {
  const lines = await ctx.db
    .select()
    .from(batchLines)
    .where(and(eq(batchLines.batchId, batchId), gt(batchLines.pieces, 0)))
    .orderBy(asc(batchLines.position));
  const open = lines.map((line) => ({
    ...line,
    pieces: line.pieces - (standing.get(line.id)?.committed ?? 0),
  }));
  const sizes = await lotSizes(ctx, open);
  const adjusted = lines.map((line, index) => {
    const before = standing.get(line.id);
    return {
      lineId: line.id,
      lastLotNumber: before?.lastLotNumber ?? 0,
      changes: adjustLots(before?.waiting ?? [], sizes[index] ?? []),
    };
  });
  await write(ctx, adjusted, ctx.now);
}
