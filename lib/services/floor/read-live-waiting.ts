import type { WaitingDto } from '@/lib/schemas/floor';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { selectWaiting } from './waiting';

/** What waits, read once for every open stream. */
export async function readLiveWaiting({ ctx }: { ctx: ServiceContext }): Promise<WaitingDto> {
  authoriseSystem(ctx);
  return selectWaiting(ctx);
}
