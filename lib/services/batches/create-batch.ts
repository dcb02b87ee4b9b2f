import { createBatchSchema } from '@/lib/schemas/batches';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { insertBatch } from './insert-batch';
import { makeLots } from './make-lots';

/** Makes a batch by hand, as a draft or queued at once. Answers its id. */
export async function createBatch({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<{ batchId: string }> {
  const actor = authorise(ctx, 'batches.write');
  const { queue, ...batch } = parseInput(createBatchSchema, input);
  return inTransaction({ ...ctx, actor }, async (inner) => {
    const batchId = await insertBatch(inner, batch, null);
    if (queue) await makeLots(inner, batchId);
    return { batchId };
  });
}
