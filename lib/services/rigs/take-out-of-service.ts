import { eq } from 'drizzle-orm';
import { rigs } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { takeOutOfServiceSchema } from '@/lib/schemas/setup-rigs';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { causes, tell } from '../tell';
import { inTransaction } from '../transaction';
import { giveBackPrepared } from './give-back-prepared';
import { lockRig } from './lock-rig';
import { requireStandstill } from './require-standstill';

/**
 * Takes a rig out of service: it gets no lot, gives back one that has not begun, and nothing starts on it.
 * @throws EllwandError `rig-busy` while a run is under way (stop it first), `illegal-step` when it is out already.
 */
export async function takeOutOfService({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<void> {
  const actor = authorise(ctx, 'rigs.service');
  const { personId } = actor;
  const { rigId, reason } = parseInput(takeOutOfServiceSchema, input);
  return inTransaction({ ...ctx, actor }, async (inner) => {
    const rig = await lockRig(inner, rigId);
    if (rig.outOfServiceAt) throw new EllwandError('illegal-step');
    await requireStandstill(inner, rigId);
    await inner.db
      .update(rigs)
      .set({ outOfServiceAt: ctx.now, outOfServiceBy: personId, outOfServiceReason: reason })
      .where(eq(rigs.id, rigId));
    await giveBackPrepared(inner, rig);
    await audit(inner, 'rig.out-of-service', `rig:${rigId}`, { reason });
    await tell(inner, { news: 'rig', rigId });
    await causes(inner, { topic: 'dispatch', payload: { because: 'rig out of service' } });
  });
}
