import { and, eq, type SQL } from 'drizzle-orm';
import { batchLines, lots } from '@/db/schema/batches';
import { lotListSchema, type LotPage } from '@/lib/schemas/batch-list';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { selectLots } from './lot-rows';

const LOTS_A_PAGE = 200;

/** Lots, of one batch or in one state when asked so, 200 a page. */
export async function listLots({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<LotPage> {
  authorise(ctx, 'batches.read');
  const { state, batchId, page } = parseInput(lotListSchema, input);
  const where: SQL | undefined = and(
    state === null ? undefined : eq(lots.state, state),
    batchId === null ? undefined : eq(batchLines.batchId, batchId),
  );
  const counted = ctx.db
    .select({ id: lots.id })
    .from(lots)
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId));
  const total = await ctx.db.$count(counted.where(where).as('counted'));
  const rows = await selectLots(ctx, where, { limit: LOTS_A_PAGE, offset: (page - 1) * LOTS_A_PAGE });
  return { lots: rows, total, page, pages: Math.max(1, Math.ceil(total / LOTS_A_PAGE)) };
}
