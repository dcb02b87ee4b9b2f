import { eq } from 'drizzle-orm';
import { batches } from '@/db/schema/batches';
import { EllwandError } from '@/lib/errors';
import { problemsOfChange } from '@/lib/plan/line-changes';
import { changeBatchSchema } from '@/lib/schemas/batches';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { causes, tell } from '../tell';
import { inTransaction } from '../transaction';
import { applyLineChanges } from './apply-line-changes';
import { applyLotChanges } from './apply-lot-changes';
import { lockBatch } from './lock-batch';
import { requireWires } from './require-wires';
import { lockLines } from './standing-lines';

/**
 * Changes a batch that is not withdrawn, also one that is cut in part: what is cut or on a rig stays, waiting lots are
 * made to fit.
 * @throws EllwandError `changed-meanwhile` when it is not the revision that was looked at, or a line of it is gone;
 * `illegal-step` when it is withdrawn; `bad-input` for what lines that are cut in part do not allow.
 */
export async function changeBatch({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  authorise(ctx, 'batches.write');
  const { batchId, revision, lines, name, dueAt, priority } = parseInput(changeBatchSchema, input);
  return inTransaction(ctx, async (inner) => {
    const batch = await lockBatch(inner, batchId);
    if (batch.withdrawnAt) throw new EllwandError('illegal-step');
    if (batch.revision !== revision) throw new EllwandError('changed-meanwhile');
    await requireWires(inner, lines);
    const standing = await lockLines(inner, batchId);
    const known = lines.every(({ id }) => id === null || standing.has(id));
    const once =
      new Set(lines.flatMap(({ id }) => id ?? [])).size === lines.filter(({ id }) => id !== null).length;
    if (!known || !once) throw new EllwandError('changed-meanwhile');
    const fields = problemsOfChange(lines, standing);
    if (fields.length > 0) throw new EllwandError('bad-input', { fields });
    await applyLineChanges(inner, batchId, lines, standing);
    if (batch.queuedAt) await applyLotChanges(inner, batchId, standing);
    const due = dueAt === null ? null : new Date(dueAt);
    await inner.db
      .update(batches)
      .set({ name, dueAt: due, priority, revision: revision + 1 })
      .where(eq(batches.id, batchId));
    const pieces = lines.reduce((sum, line) => sum + line.pieces, 0);
    await audit(inner, 'batch.change', `batch:${batchId}`, {
      revision: revision + 1,
      lines: lines.length,
      pieces,
    });
    await tell(inner, { news: 'batch', batchId });
    if (batch.queuedAt) await causes(inner, { topic: 'dispatch', payload: { because: 'batch changed' } });
  });
}
