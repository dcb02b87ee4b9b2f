import { EllwandError } from '@/lib/errors';
import { oneBatchSchema } from '@/lib/schemas/batches';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { lockBatch } from './lock-batch';
import { makeLots } from './make-lots';

/** Hands a draft to the rigs. @throws EllwandError `illegal-step` when it was queued or withdrawn already. */
export async function queueBatch({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  authorise(ctx, 'batches.write');
  const { batchId } = parseInput(oneBatchSchema, input);
  return inTransaction(ctx, async (inner) => {
    const batch = await lockBatch(inner, batchId);
    if (batch.queuedAt || batch.withdrawnAt) throw new EllwandError('illegal-step');
    await makeLots(inner, batchId);
  });
}
