import { sweepSilence } from '@/lib/services/alarms/sweep-silence';
import type { JobHandler } from './handler';

export const handleSweepSilence: JobHandler = async ({ ctx }) => {
  await sweepSilence({ ctx });
};
