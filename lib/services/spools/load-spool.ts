import { and, eq, ne } from 'drizzle-orm';
import { rigs } from '@/db/schema/rigs';
import { spools } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { loadSpoolSchema } from '@/lib/schemas/setup-stock';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { lockRig } from '../rigs/lock-rig';
import { requireStandstill } from '../rigs/require-standstill';
import { causes, tell } from '../tell';
import { inTransaction } from '../transaction';

/**
 * Says which spool is on the rig, or that none is.
 * @throws EllwandError `rig-busy` while a run is cutting, `illegal-step` when the spool is on another rig or ended.
 */
export async function loadSpool({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  authorise(ctx, 'rigs.load');
  const { rigId, spoolId } = parseInput(loadSpoolSchema, input);
  return inTransaction(ctx, async (inner) => {
    const rig = await lockRig(inner, rigId);
    await requireStandstill(inner, rigId, ['cutting']);
    if (spoolId) await requireFree(inner, spoolId, rigId);
    await inner.db.update(rigs).set({ spoolId }).where(eq(rigs.id, rigId));
    await audit(inner, 'spool.load', `rig:${rigId}`, { from: rig.spoolId, to: spoolId });
    await tell(inner, { news: 'rig', rigId });
    await causes(inner, { topic: 'dispatch', payload: { because: 'spool loaded' } });
  });
}

/** The spool's row is locked, so that two people cannot load it on two rigs at once. */
async function requireFree(ctx: ServiceContext, spoolId: string, rigId: string): Promise<void> {
  const [spool] = await ctx.db.select().from(spools).where(eq(spools.id, spoolId)).for('update');
  if (!spool) throw new EllwandError('not-found');
  const refuse = (message: string) =>
    new EllwandError('illegal-step', { fields: [{ path: 'spoolId', message }] });
  if (spool.endedAt) throw refuse('This spool has ended.');
  const [other] = await ctx.db
    .select({ name: rigs.name })
    .from(rigs)
    .where(and(eq(rigs.spoolId, spoolId), ne(rigs.id, rigId)));
  if (other) throw refuse(`This spool is on ${other.name}. Take it off there first.`);
}
