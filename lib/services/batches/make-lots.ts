import { asc, eq } from 'drizzle-orm';
import { batches, batchLines, lots } from '@/db/schema/batches';
import { audit } from '../audit';
import type { ServiceContext } from '../context';
import { causes, tell } from '../tell';
import { inParts } from './insert-rows';
import { lotSizes } from './lot-sizes';

/** Hands a draft to the rigs: splits its lines into waiting lots and causes dispatch; part of the caller's transaction. */
export async function makeLots(ctx: ServiceContext, batchId: string): Promise<void> {
  const lines = await ctx.db
    .select()
    .from(batchLines)
    .where(eq(batchLines.batchId, batchId))
    .orderBy(asc(batchLines.position));
  const sizes = await lotSizes(ctx, lines);
  const rows = lines.flatMap((line, index) =>
    (sizes[index] ?? []).map((pieces, at) => ({
      lineId: line.id,
      number: at + 1,
      pieces,
      queuedAt: ctx.now,
    })),
  );
  await inParts(rows, (part) => ctx.db.insert(lots).values(part));
  await ctx.db.update(batches).set({ queuedAt: ctx.now }).where(eq(batches.id, batchId));
  await audit(ctx, 'batch.queue', `batch:${batchId}`, { lots: rows.length });
  await tell(ctx, { news: 'batch', batchId });
  await causes(ctx, { topic: 'dispatch', payload: { because: 'batch queued' } });
}
