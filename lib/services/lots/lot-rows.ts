import { and, eq, type SQL, sql } from 'drizzle-orm';
import { batchLines, lots } from '@/db/schema/batches';
import { rigs } from '@/db/schema/rigs';
import { bags, runs } from '@/db/schema/runs';
import type { LotDto } from '@/lib/schemas/batches';
import type { ServiceContext } from '../context';

/** Lots with their counts, in the order of batch line and lot number; `where` may name lots and lines. */
export async function selectLots(
  ctx: ServiceContext,
  where: SQL | undefined,
  page: { limit: number; offset: number } | null = null,
): Promise<LotDto[]> {
  // A lot has more than one run when it was taken back; dropped ones never cut anything.
  const counts = ctx.db.$with('counts').as(
    ctx.db
      .select({
        lotId: runs.lotId,
        cut: sql<number>`sum(${runs.cut})::int`.as('lot_cut'),
        bagged: sql<number | null>`sum(${bags.pieces})::int`.as('lot_bagged'),
        bagCode: sql<
          string | null
        >`(array_agg(${bags.code} order by ${bags.clearedAt} desc nulls last))[1]`.as('lot_bag_code'),
        runId: sql<string>`(array_agg(${runs.id} order by ${runs.preparedAt} desc))[1]`.as('lot_run_id'),
      })
      .from(runs)
      .innerJoin(lots, eq(lots.id, runs.lotId))
      .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
      .leftJoin(bags, eq(bags.runId, runs.id))
      .where(and(sql`${runs.state} <> 'dropped'`, where))
      .groupBy(runs.lotId),
  );
  const query = ctx.db
    .with(counts)
    .select({
      id: lots.id,
      batchId: batchLines.batchId,
      lineId: lots.lineId,
      number: lots.number,
      pieces: lots.pieces,
      state: lots.state,
      rigId: lots.rigId,
      rigName: rigs.name,
      runId: counts.runId,
      cut: sql<number>`coalesce(${counts.cut}, 0)`,
      bagged: counts.bagged,
      bagCode: counts.bagCode,
      waitingReason: lots.waitingReason,
    })
    .from(lots)
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .leftJoin(rigs, eq(rigs.id, lots.rigId))
    .leftJoin(counts, eq(counts.lotId, lots.id))
    .where(where)
    .orderBy(batchLines.batchId, batchLines.position, lots.number);
  return page ? query.limit(page.limit).offset(page.offset) : query;
}
