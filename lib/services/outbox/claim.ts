import { and, isNull, type SQL } from 'drizzle-orm';
import { outbox } from '@/db/schema/traffic';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { inTransaction } from '../transaction';

export type Work<Result> = (inner: ServiceContext) => Promise<Result>;

/** Claims the open rows of `which` and does `work` in the same transaction; `null` and no work where none is open. */
export async function claim<Result>(
  ctx: ServiceContext,
  which: SQL,
  work: Work<Result>,
): Promise<Result | null> {
  authoriseSystem(ctx);
  return inTransaction(ctx, async (inner) => {
    const rows = await inner.db
      .update(outbox)
      .set({ doneAt: inner.now })
      .where(and(which, isNull(outbox.doneAt)))
      .returning({ id: outbox.id });
    return rows.length > 0 ? work(inner) : null;
  });
}
