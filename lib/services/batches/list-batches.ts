import { and, asc, desc, eq, exists, ilike, inArray, isNull, lt, or, type SQL, sql } from 'drizzle-orm';
import { batches, batchLines } from '@/db/schema/batches';
import { BATCHES_A_PAGE, type BatchList, batchListSchema, type BatchPage } from '@/lib/schemas/batch-list';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { batchRows } from './batch-rows';
import { batchSummary, wiresOfBatches } from './batch-wires';

const DAY_MS = 86_400_000;
/** Batches that still ask for something. */
const OPEN = ['draft', 'queued', 'cutting'] as const;

function ofSearch(ctx: ServiceContext, search: string): SQL | undefined {
  if (search === '') return undefined;
  const pattern = `%${search.replaceAll(/[\\%_]/g, String.raw`\$&`)}%`;
  const labelled = ctx.db
    .select({ id: batchLines.id })
    .from(batchLines)
    .where(and(eq(batchLines.batchId, batches.id), ilike(batchLines.label, pattern)));
  return or(
    ilike(batches.name, pattern),
    ilike(batches.sourceName, pattern),
    sql`${batches.number}::text = ${search.replace(/^#/, '')}`,
    exists(labelled),
  );
}

function ofWire(ctx: ServiceContext, wireId: string | null): SQL | undefined {
  if (wireId === null) return undefined;
  return exists(
    ctx.db
      .select({ id: batchLines.id })
      .from(batchLines)
      .where(and(eq(batchLines.batchId, batches.id), eq(batchLines.wireId, wireId))),
  );
}

function ofDue(now: Date, due: BatchList['due']): SQL | undefined {
  switch (due) {
    case 'overdue':
      return lt(batches.dueAt, now);
    case 'day':
      return lt(batches.dueAt, new Date(now.getTime() + DAY_MS));
    case 'week':
      return lt(batches.dueAt, new Date(now.getTime() + 7 * DAY_MS));
    case 'none':
      return isNull(batches.dueAt);
    case 'any':
      return undefined;
  }
}

function ofState(state: SQL, wanted: BatchList['state']): SQL | undefined {
  if (wanted === 'all') return undefined;
  return wanted === 'open' ? inArray(state, [...OPEN]) : eq(state, wanted);
}

function orderOf({ sort, descending }: BatchList): SQL[] {
  const way = descending ? desc : asc;
  switch (sort) {
    case 'due':
      return [sql`${way(batches.dueAt)} nulls last`, asc(batches.priority), asc(batches.number)];
    case 'priority':
      return [way(batches.priority), sql`${asc(batches.dueAt)} nulls last`, asc(batches.number)];
    case 'number':
      return [way(batches.number)];
    case 'name':
      return [way(sql`lower(${batches.name})`), asc(batches.number)];
  }
}

/** Batches as searched, filtered and sorted, fifty a page. */
export async function listBatches({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<BatchPage> {
  authorise(ctx, 'batches.read');
  const list = parseInput(batchListSchema, input);
  const { query, state } = batchRows(ctx.db);
  const rows = await query
    .where(
      and(
        ofSearch(ctx, list.search),
        ofWire(ctx, list.wire),
        ofDue(ctx.now, list.due),
        ofState(state, list.state),
      ),
    )
    .orderBy(...orderOf(list))
    .limit(BATCHES_A_PAGE)
    .offset((list.page - 1) * BATCHES_A_PAGE);
  const wires = await wiresOfBatches(
    ctx,
    rows.map(({ id }) => id),
  );
  const total = rows[0]?.total ?? 0;
  return {
    batches: rows.map((row) => batchSummary(row, wires.get(row.id) ?? [])),
    total,
    page: list.page,
    pages: Math.max(1, Math.ceil(total / BATCHES_A_PAGE)),
  };
}
