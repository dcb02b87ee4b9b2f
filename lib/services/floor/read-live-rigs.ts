import type { RigDto } from '@/lib/schemas/floor';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { selectRigs } from './rig-rows';

/** Rigs that news came of, read once for every open stream; each stream's reader was authorised when it opened. */
export async function readLiveRigs({
  ctx,
  rigIds,
}: {
  ctx: ServiceContext;
  rigIds: readonly string[];
}): Promise<RigDto[]> {
  authoriseSystem(ctx);
  return selectRigs(ctx, rigIds);
}
