import { sql } from 'drizzle-orm';
import { outbox } from '@/db/schema/traffic';
import { NEWS_CHANNEL, type News } from '@/lib/schemas/news';
import type { OutboxEntry } from '@/lib/schemas/outbox';
import type { ServiceContext } from './context';

/** Tells listeners of a change when, and only if, the transaction commits. */
export async function tell(ctx: ServiceContext, news: News): Promise<void> {
  await ctx.db.execute(sql`select pg_notify(${NEWS_CHANNEL}, ${JSON.stringify(news)})`);
}

/** Writes what the change causes into the outbox; the worker takes it from there. */
export async function causes(ctx: ServiceContext, entry: OutboxEntry): Promise<void> {
  await ctx.db.insert(outbox).values({ topic: entry.topic, payload: entry.payload, createdAt: ctx.now });
  await tell(ctx, { news: 'outbox' });
}
