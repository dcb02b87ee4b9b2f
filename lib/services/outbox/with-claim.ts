import { and, eq, isNull, type SQL } from 'drizzle-orm';
import { outbox } from '@/db/schema/traffic';
import type { OutboxEntry } from '@/lib/schemas/outbox';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { inTransaction } from '../transaction';

type Work<Result> = (inner: ServiceContext) => Promise<Result>;

async function claimed<Result>(ctx: ServiceContext, which: SQL, work: Work<Result>): Promise<Result | null> {
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

/**
 * Claims one row and does its work in the same transaction: `null` and no work when it was done before. A failure
 * leaves the row open for the next try.
 */
export function withClaim<Result>(
  ctx: ServiceContext,
  id: number,
  work: Work<Result>,
): Promise<Result | null> {
  return claimed(ctx, eq(outbox.id, id), work);
}

/** Claims all open rows of a topic at once, for work that answers all of them together. */
export function withTopicClaim<Result>(
  ctx: ServiceContext,
  topic: OutboxEntry['topic'],
  work: Work<Result>,
): Promise<Result | null> {
  return claimed(ctx, eq(outbox.topic, topic), work);
}
