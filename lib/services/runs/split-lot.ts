import { eq, sql } from 'drizzle-orm';
import { batches, batchLines, lots } from '@/db/schema/batches';
import type { ServiceContext } from '../context';

/** A run's lot with what is needed to name and split it; locked until the transaction ends. */
export async function lockLot(ctx: ServiceContext, lotId: string) {
  const [found] = await ctx.db
    .select({ lot: lots, line: batchLines, batch: batches })
    .from(lots)
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(batches, eq(batches.id, batchLines.batchId))
    .where(eq(lots.id, lotId))
    .for('update', { of: [lots, batchLines] });
  return found;
}

export type LockedLot = NonNullable<Awaited<ReturnType<typeof lockLot>>>;

/**
 * Leaves `kept` pieces in a lot and makes a new lot of the rest, which waits in the old one's turn, or is withdrawn
 * with its batch. So a line's lots add up at every commit. The locked line keeps two splits from taking one number.
 */
export async function splitLot(ctx: ServiceContext, { lot, batch }: LockedLot, kept: number): Promise<void> {
  const rest = lot.pieces - kept;
  if (rest <= 0) return;
  await ctx.db.update(lots).set({ pieces: kept }).where(eq(lots.id, lot.id));
  const [made] = await ctx.db
    .insert(lots)
    .values({
      lineId: lot.lineId,
      number: sql`(select max(l.number) + 1 from lots l where l.line_id = ${lot.lineId})`,
      pieces: rest,
      queuedAt: lot.queuedAt,
    })
    .returning({ id: lots.id });
  if (made && batch.withdrawnAt) {
    await ctx.db.update(lots).set({ state: 'withdrawn' }).where(eq(lots.id, made.id));
  }
}
