import type { FloorDto } from '@/lib/schemas/floor';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { selectRigs } from './rig-rows';
import { selectWaiting } from './waiting';

/** The whole floor: every rig in bench order, and what waits. */
export async function readFloor({ ctx }: { ctx: ServiceContext }): Promise<FloorDto> {
  authorise(ctx, 'floor.read');
  const rigs = await selectRigs(ctx);
  return { at: ctx.now.toISOString(), rigs, waiting: await selectWaiting(ctx) };
}
