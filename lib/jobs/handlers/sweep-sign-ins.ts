import { sweepSignInAttempts } from '@/lib/services/people/sweep-sign-in-attempts';
import type { JobHandler } from './handler';

export const handleSweepSignIns: JobHandler = async ({ ctx }) => {
  await sweepSignInAttempts({ ctx });
};
