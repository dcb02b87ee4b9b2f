import { sql } from 'drizzle-orm';
import type { ServiceContext } from '../context';
import { tell } from '../tell';
import type { WaitingLotRow } from './lots-to-give';

/**
 * Writes the reasons that changed, and tells of their batches. Lots in somebody else's hands are passed over: waiting
 * for them could end in a circle, and the next look writes theirs.
 */
export async function writeReasons(
  ctx: ServiceContext,
  waiting: readonly WaitingLotRow[],
  reasons: ReadonlyMap<string, string>,
): Promise<void> {
  const changed = waiting.flatMap(({ lotId, batchId, waitingReason }) => {
    const reason = reasons.get(lotId);
    return reason === undefined || reason === waitingReason ? [] : [{ lotId, batchId, reason }];
  });
  if (changed.length === 0) return;
  const rows = changed.map(({ lotId, reason }) => ({ id: lotId, reason }));
  await ctx.db.execute(sql`
    with told as (
      select * from json_to_recordset(${JSON.stringify(rows)}::json) as t(id uuid, reason text)
    ), free as (
      select l.id from lots l join told on told.id = l.id
      where l.state = 'waiting' for update of l skip locked
    )
    update lots l set waiting_reason = told.reason from told, free where l.id = told.id and l.id = free.id`);
  for (const batchId of new Set(changed.map((lot) => lot.batchId)))
    await tell(ctx, { news: 'batch', batchId });
}
