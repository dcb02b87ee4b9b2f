import type { RigDto } from '@/lib/schemas/floor';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { selectRigs } from './rig-rows';

/** All rigs in bench order, to anyone signed in. */
export async function listRigs({ ctx }: { ctx: ServiceContext }): Promise<RigDto[]> {
  authorise(ctx, 'floor.read');
  return selectRigs(ctx);
}
