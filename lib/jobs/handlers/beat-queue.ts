import { beat } from '@/lib/services/health/beat';
import type { JobHandler } from './handler';

/** This very job came through Redis and back: the queue carries. */
export const handleBeatQueue: JobHandler = async ({ ctx }) => {
  await beat({ ctx, name: 'queue' });
};
