import { and, eq, isNotNull, isNull } from 'drizzle-orm';
import { blades } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { removeBladeSchema } from '@/lib/schemas/setup-stock';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { lockRig } from '../rigs/lock-rig';
import { requireStandstill } from '../rigs/require-standstill';
import { tell } from '../tell';
import { inTransaction } from '../transaction';

/**
 * Says that a blade was taken out of its rig, and why. It does not come back.
 * @throws EllwandError `rig-busy` while a run is cutting, `not-found` when the blade is in no rig.
 */
export async function removeBlade({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  const { personId } = authorise(ctx, 'blades.write');
  const { bladeId, reason } = parseInput(removeBladeSchema, input);
  const isFitted = and(eq(blades.id, bladeId), isNotNull(blades.rigId), isNull(blades.removedAt));
  return inTransaction(ctx, async (inner) => {
    const [blade] = await inner.db.select().from(blades).where(isFitted);
    if (!blade?.rigId) throw new EllwandError('not-found');
    await lockRig(inner, blade.rigId);
    await requireStandstill(inner, blade.rigId, ['cutting']);
    const [removed] = await inner.db
      .update(blades)
      .set({ removedAt: ctx.now, removedBy: personId, removedReason: reason })
      .where(isFitted)
      .returning({ cuts: blades.cuts });
    if (!removed) throw new EllwandError('not-found');
    await audit(inner, 'blade.remove', `blade:${bladeId}`, { rigId: blade.rigId, reason, ...removed });
    await tell(inner, { news: 'rig', rigId: blade.rigId });
  });
}
