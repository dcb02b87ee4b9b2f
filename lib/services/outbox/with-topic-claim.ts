import { eq } from 'drizzle-orm';
import { outbox } from '@/db/schema/traffic';
import type { OutboxEntry } from '@/lib/schemas/outbox';
import type { ServiceContext } from '../context';
import { claim, type Work } from './claim';

interface TopicClaim<Result> {
  ctx: ServiceContext;
  topic: OutboxEntry['topic'];
  work: Work<Result>;
}

/** Claims all open rows of a topic at once, for work that answers all of them together. */
export function withTopicClaim<Result>({ ctx, topic, work }: TopicClaim<Result>): Promise<Result | null> {
  return claim(ctx, eq(outbox.topic, topic), work);
}
