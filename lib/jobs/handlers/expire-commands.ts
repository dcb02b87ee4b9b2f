import { expireCommands } from '@/lib/services/traffic/expire-commands';
import type { JobHandler } from './handler';

export const handleExpireCommands: JobHandler = async ({ ctx }) => {
  await expireCommands({ ctx });
};
