import { giveLots } from '@/lib/services/dispatch/give-lots';
import type { JobHandler } from './handler';

/** The safety net under the outbox: what changed without a word, such as a reading that grew old. */
export const handleSweepDispatch: JobHandler = async ({ ctx }) => {
  await giveLots({ ctx });
};
