import { and, eq, isNull } from 'drizzle-orm';
import { blades } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { fitBladeSchema } from '@/lib/schemas/setup-stock';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { lockRig } from '../rigs/lock-rig';
import { requireStandstill } from '../rigs/require-standstill';
import { tell } from '../tell';
import { inTransaction } from '../transaction';

/**
 * Says that a spare blade was fitted to a rig.
 * @throws EllwandError `rig-busy` while a run is cutting, `illegal-step` when the rig has a blade, `not-found` when
 * the blade is no spare one.
 */
export async function fitBlade({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  const { personId } = authorise(ctx, 'blades.write');
  const { bladeId, rigId } = parseInput(fitBladeSchema, input);
  return inTransaction(ctx, async (inner) => {
    await lockRig(inner, rigId);
    await requireStandstill(inner, rigId, ['cutting']);
    const fitted = await inner.db.$count(blades, and(eq(blades.rigId, rigId), isNull(blades.removedAt)));
    if (fitted > 0) {
      throw new EllwandError('illegal-step', {
        fields: [{ path: 'rigId', message: 'This rig has a blade. Take it out first.' }],
      });
    }
    const taken = await inner.db
      .update(blades)
      .set({ rigId, fittedAt: ctx.now, fittedBy: personId })
      .where(and(eq(blades.id, bladeId), isNull(blades.rigId), isNull(blades.removedAt)))
      .returning({ id: blades.id });
    if (taken.length === 0) throw new EllwandError('not-found');
    await audit(inner, 'blade.fit', `blade:${bladeId}`, { rigId });
    await tell(inner, { news: 'rig', rigId });
  });
}
