import { and, inArray, isNull } from 'drizzle-orm';
import { outbox } from '@/db/schema/traffic';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';

/** Notes that the rows were handed to the job queue, the first time they were. */
export async function markRelayed({ ctx, ids }: { ctx: ServiceContext; ids: number[] }): Promise<void> {
  authoriseSystem(ctx);
  if (ids.length === 0) return;
  await ctx.db
    .update(outbox)
    .set({ relayedAt: ctx.now })
    .where(and(inArray(outbox.id, ids), isNull(outbox.relayedAt)));
}
