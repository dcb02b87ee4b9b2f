import { and, asc, isNull, lte, sql } from 'drizzle-orm';
import { outbox } from '@/db/schema/traffic';
import { outboxSchema, type OutboxEntry } from '@/lib/schemas/outbox';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';

/** The most rows relayed at a time; the rest follows with the next look. */
const ROWS_MOST = 500;

export interface OpenOutboxRow {
  id: number;
  entry: OutboxEntry;
}

/**
 * What is written and not yet done, up to those that are `minAgeMs` old: never relayed ones first, so that many that fail
 * hold up no new one. Rows of no known topic are left out.
 */
export async function listOpenOutbox({
  ctx,
  minAgeMs = 0,
}: {
  ctx: ServiceContext;
  minAgeMs?: number;
}): Promise<OpenOutboxRow[]> {
  authoriseSystem(ctx);
  const rows = await ctx.db
    .select()
    .from(outbox)
    .where(and(isNull(outbox.doneAt), lte(outbox.createdAt, new Date(ctx.now.getTime() - minAgeMs))))
    .orderBy(sql`${outbox.relayedAt} nulls first`, asc(outbox.id))
    .limit(ROWS_MOST);
  return rows.flatMap((row) => {
    const parsed = outboxSchema.safeParse({ topic: row.topic, payload: row.payload });
    return parsed.success ? [{ id: row.id, entry: parsed.data }] : [];
  });
}
