import { eq, type SQL, sql } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { batches, batchLines, lots } from '@/db/schema/batches';
import { bags, runs } from '@/db/schema/runs';
import type { BatchState } from '@/lib/fleet/batch-state';

/** Lines and pieces of each batch; lines that were taken out stay with no pieces and are not counted. */
function linesOf(db: Db) {
  return db.$with('lines_of').as(
    db
      .select({
        batchId: batchLines.batchId,
        lines: sql<number>`(count(*) filter (where ${batchLines.pieces} > 0))::int`.as('batch_line_count'),
        pieces: sql<number>`sum(${batchLines.pieces})::int`.as('batch_pieces'),
      })
      .from(batchLines)
      .groupBy(batchLines.batchId),
  );
}

/** What the lots of each batch do, as far as its state and its reason need it. */
function lotsOf(db: Db) {
  const of = (condition: SQL) => sql<number>`count(*) filter (where ${condition})`;
  return db.$with('lots_of').as(
    db
      .select({
        batchId: batchLines.batchId,
        counting: of(sql`${lots.state} <> 'withdrawn'`).as('lots_counting'),
        bagged: of(sql`${lots.state} = 'bagged'`).as('lots_bagged'),
        begun: of(sql`${lots.state} in ('running', 'cut', 'bagged')`).as('lots_begun'),
        reason: sql<
          string | null
        >`(array_agg(${lots.waitingReason} order by ${batchLines.position}, ${lots.number})
          filter (where ${lots.state} = 'waiting' and ${lots.waitingReason} <> ''))[1]`.as('lots_reason'),
      })
      .from(lots)
      .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
      .groupBy(batchLines.batchId),
  );
}

function cutOf(db: Db) {
  return db.$with('cut_of').as(
    db
      .select({
        batchId: batchLines.batchId,
        cut: sql<number>`sum(${runs.cut})::int`.as('batch_cut'),
        bagged: sql<number | null>`sum(${bags.pieces})::int`.as('batch_bagged'),
      })
      .from(runs)
      .innerJoin(lots, eq(lots.id, runs.lotId))
      .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
      .leftJoin(bags, eq(bags.runId, runs.id))
      .groupBy(batchLines.batchId),
  );
}

/**
 * Batches with their totals, ready for `where`, `orderBy` and `limit`. `state` says in SQL what lib/fleet/batch-state
 * says in TypeScript; a test holds the two together.
 */
export function batchRows(db: Db) {
  const lines = linesOf(db);
  const parts = lotsOf(db);
  const cut = cutOf(db);
  const state = sql<BatchState>`case
    when ${batches.withdrawnAt} is not null then 'withdrawn'
    when ${batches.queuedAt} is null then 'draft'
    when ${parts.counting} > 0 and ${parts.counting} = ${parts.bagged} then 'done'
    when ${parts.begun} > 0 then 'cutting'
    else 'queued' end`;
  const query = db
    .with(lines, parts, cut)
    .select({
      id: batches.id,
      number: batches.number,
      name: batches.name,
      dueAt: batches.dueAt,
      priority: batches.priority,
      createdAt: batches.createdAt,
      revision: batches.revision,
      sourceName: batches.sourceName,
      createdBy: batches.createdBy,
      state,
      lines: sql<number>`coalesce(${lines.lines}, 0)`,
      pieces: sql<number>`coalesce(${lines.pieces}, 0)`,
      cut: sql<number>`coalesce(${cut.cut}, 0)`,
      bagged: sql<number>`coalesce(${cut.bagged}, 0)`,
      waitingReason: sql<string>`coalesce(${parts.reason}, '')`,
      total: sql<number>`(count(*) over ())::int`,
    })
    .from(batches)
    .leftJoin(lines, eq(lines.batchId, batches.id))
    .leftJoin(parts, eq(parts.batchId, batches.id))
    .leftJoin(cut, eq(cut.batchId, batches.id))
    .$dynamic();
  return { query, state };
}

export type BatchRow = Awaited<ReturnType<typeof batchRows>['query']>[number];
