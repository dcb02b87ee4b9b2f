import { asc, desc, eq, sql } from 'drizzle-orm';
import { batches, batchLines, lots } from '@/db/schema/batches';
import type { WaitingDto } from '@/lib/schemas/floor';
import type { ServiceContext } from '../context';

/** What is on no rig: how much of it, and the lot whose turn is next with its reason. */
export async function selectWaiting(ctx: ServiceContext): Promise<WaitingDto> {
  const rows = await ctx.db
    .select({
      lots: sql<number>`(count(*) over ())::int`,
      pieces: sql<number>`(sum(${lots.pieces}) over ())::int`,
      batchId: batches.id,
      batchName: batches.name,
      dueAt: batches.dueAt,
      reason: lots.waitingReason,
    })
    .from(lots)
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(batches, eq(batches.id, batchLines.batchId))
    .where(eq(lots.state, 'waiting'))
    .orderBy(
      asc(sql`${batches.dueAt} is null`),
      asc(batches.dueAt),
      asc(batches.priority),
      asc(lots.queuedAt),
      desc(lots.pieces),
    )
    .limit(1);
  const [next] = rows;
  if (!next) return { lots: 0, pieces: 0, next: null };
  const { batchId, batchName, reason } = next;
  const dueAt = next.dueAt?.toISOString() ?? null;
  return { lots: next.lots, pieces: next.pieces, next: { batchId, batchName, dueAt, reason } };
}
