import { EllwandError } from '@/lib/errors';
import type { RigDto } from '@/lib/schemas/floor';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { selectRigs } from './rig-rows';

/** One rig as the floor shows it. @throws EllwandError `not-found` */
export async function readRig({ ctx, rigId }: { ctx: ServiceContext; rigId: string }): Promise<RigDto> {
  authorise(ctx, 'floor.read');
  const [rig] = await selectRigs(ctx, [rigId]);
  if (!rig) throw new EllwandError('not-found');
  return rig;
}
