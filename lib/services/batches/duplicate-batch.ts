import { and, asc, eq, gt } from 'drizzle-orm';
import { batches, batchLines } from '@/db/schema/batches';
import { EllwandError } from '@/lib/errors';
import { oneBatchSchema } from '@/lib/schemas/batches';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { insertBatch } from './insert-batch';

const NAME_CHARACTERS_MOST = 80;

/** Makes a draft with the same lines and no due time, to be looked at before it is queued. Answers its id. */
export async function duplicateBatch({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<{ batchId: string }> {
  const actor = authorise(ctx, 'batches.write');
  const { batchId } = parseInput(oneBatchSchema, input);
  return inTransaction({ ...ctx, actor }, async (inner) => {
    const [batch] = await inner.db.select().from(batches).where(eq(batches.id, batchId));
    if (!batch) throw new EllwandError('not-found');
    const lines = await inner.db
      .select()
      .from(batchLines)
      .where(and(eq(batchLines.batchId, batchId), gt(batchLines.pieces, 0)))
      .orderBy(asc(batchLines.position));
    const name = `${batch.name}, again`.slice(0, NAME_CHARACTERS_MOST);
    const copy = { name, dueAt: null, priority: batch.priority, lines };
    return { batchId: await insertBatch(inner, copy, null) };
  });
}
