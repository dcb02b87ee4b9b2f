import { giveLots } from '@/lib/services/dispatch/give-lots';
import { withTopicClaim } from '@/lib/services/outbox/with-topic-claim';
import type { JobHandler } from './handler';

/** One look at all lots and rigs answers every open wish at once; the other jobs of a burst find nothing to claim. */
export const handleDispatch: JobHandler = async ({ ctx }) => {
  await withTopicClaim({ ctx, topic: 'dispatch', work: (inner) => giveLots({ ctx: inner }) });
};
