import { eq } from 'drizzle-orm';
import { rigs } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { rigIdSchema } from '@/lib/schemas/setup-rigs';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { causes, tell } from '../tell';
import { inTransaction } from '../transaction';
import { lockRig } from './lock-rig';

/** Brings a rig back into service. @throws EllwandError `illegal-step` when it was never out. */
export async function returnToService({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<void> {
  authorise(ctx, 'rigs.service');
  const { rigId } = parseInput(rigIdSchema, input);
  return inTransaction(ctx, async (inner) => {
    const rig = await lockRig(inner, rigId);
    if (!rig.outOfServiceAt) throw new EllwandError('illegal-step');
    await inner.db
      .update(rigs)
      .set({ outOfServiceAt: null, outOfServiceBy: null, outOfServiceReason: null })
      .where(eq(rigs.id, rigId));
    await audit(inner, 'rig.in-service', `rig:${rigId}`, { wasOutFor: rig.outOfServiceReason });
    await tell(inner, { news: 'rig', rigId });
    await causes(inner, { topic: 'dispatch', payload: { because: 'rig in service' } });
  });
}
