import { eq } from 'drizzle-orm';
import { batches } from '@/db/schema/batches';
import { EllwandError } from '@/lib/errors';
import type { ServiceContext } from '../context';

/** The batch's row, locked until the transaction ends. @throws EllwandError `not-found` */
export async function lockBatch(ctx: ServiceContext, batchId: string): Promise<typeof batches.$inferSelect> {
  const [batch] = await ctx.db.select().from(batches).where(eq(batches.id, batchId)).for('update');
  if (!batch) throw new EllwandError('not-found');
  return batch;
}
