import { eq, max } from 'drizzle-orm';
import { profiles } from '@/db/schema/rigs';
import { publishProfileSchema } from '@/lib/schemas/setup-rigs';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { causes, tell } from '../tell';
import { inTransaction } from '../transaction';
import { giveBackPrepared } from './give-back-prepared';
import { lockRig } from './lock-rig';
import { reloadRigs } from './reload-rigs';
import { requireStandstill } from './require-standstill';

/**
 * Puts new numbers of a rig in force as its next version. A lot that has not begun there is asked back: its program
 * was made with the old ones.
 * @throws EllwandError `rig-busy` while a run is under way: it ends with the numbers it began with.
 */
export async function publishProfile({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<{ version: number }> {
  const actor = authorise(ctx, 'profiles.write');
  const { rigId, profile, reason } = parseInput(publishProfileSchema, input);
  return inTransaction({ ...ctx, actor }, async (inner) => {
    const rig = await lockRig(inner, rigId);
    await requireStandstill(inner, rigId);
    const [last] = await inner.db
      .select({ version: max(profiles.version) })
      .from(profiles)
      .where(eq(profiles.rigId, rigId));
    const version = (last?.version ?? 0) + 1;
    await inner.db
      .insert(profiles)
      .values({ rigId, version, profile, reason, createdBy: actor.personId, createdAt: ctx.now });
    await audit(inner, 'profile.publish', `rig:${rigId}`, { version, reason });
    await tell(inner, { news: 'rig', rigId });
    await causes(inner, { topic: 'dispatch', payload: { because: 'profile published' } });
    await giveBackPrepared(inner, rig);
    if (rig.agentId) await reloadRigs(inner, rig.agentId);
    return { version };
  });
}
