import { eq } from 'drizzle-orm';
import { batches, batchLines, lots } from '@/db/schema/batches';
import type { ServiceContext } from '../context';
import { causes, tell } from '../tell';
import { stepLot } from './step-lot';

/**
 * Takes a lot off its rig: back to waiting, or withdrawn when its batch is. Part of the caller's transaction; it
 * causes dispatch, for the rig is free now too.
 */
export async function freeLot(ctx: ServiceContext, lotId: string, because: string): Promise<void> {
  const [lot] = await ctx.db
    .select({
      id: lots.id,
      state: lots.state,
      batchId: batchLines.batchId,
      withdrawnAt: batches.withdrawnAt,
    })
    .from(lots)
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(batches, eq(batches.id, batchLines.batchId))
    .where(eq(lots.id, lotId))
    .for('update', { of: lots });
  if (!lot) return;
  await stepLot(ctx, lot, lot.withdrawnAt ? 'withdrawn' : 'waiting', because);
  await tell(ctx, { news: 'batch', batchId: lot.batchId });
  await causes(ctx, { topic: 'dispatch', payload: { because } });
}
