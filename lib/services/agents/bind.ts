import { and, eq, inArray, notInArray } from 'drizzle-orm';
import { rigs } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import type { PersonActor, ServiceContext } from '../context';
import { requireStandstill } from '../rigs/require-standstill';
import { reloadRigs } from '../rigs/reload-rigs';
import { tell } from '../tell';

/**
 * Makes exactly these rigs the agent's, and tells every agent that won or lost one. Raises each changed rig's fence:
 * what the former agent still holds is refused from now on.
 * @throws EllwandError `rig-busy` when one of them has a run (law 4: silence or a change of cables moves no work).
 */
export async function bindTo(
  ctx: ServiceContext<PersonActor>,
  agentId: string,
  rigIds: readonly string[],
): Promise<void> {
  const wanted = [...new Set(rigIds)];
  const found = await ctx.db
    .select()
    .from(rigs)
    .where(inArray(rigs.id, wanted))
    .orderBy(rigs.id)
    .for('update');
  if (found.length !== wanted.length) {
    throw new EllwandError('bad-input', {
      fields: [{ path: 'rigIds', message: 'Pick rigs from the list.' }],
    });
  }
  const dropped = await ctx.db
    .select()
    .from(rigs)
    .where(and(eq(rigs.agentId, agentId), notInArray(rigs.id, wanted)))
    .orderBy(rigs.id)
    .for('update');
  const won = found.filter((rig) => rig.agentId !== agentId);
  for (const rig of won) await move(ctx, rig, agentId);
  for (const rig of dropped) await move(ctx, rig, null);
  const agentIds = [agentId, ...won.map((rig) => rig.agentId)].filter((id) => id !== null);
  if (won.length + dropped.length > 0) {
    for (const id of new Set(agentIds)) await reloadRigs(ctx, id);
  }
}

async function move(
  ctx: ServiceContext,
  rig: typeof rigs.$inferSelect,
  agentId: string | null,
): Promise<void> {
  await requireStandstill(ctx, rig.id, ['prepared', 'cutting', 'paused', 'held']);
  await ctx.db
    .update(rigs)
    .set({ agentId, fence: rig.fence + 1 })
    .where(eq(rigs.id, rig.id));
  await tell(ctx, { news: 'rig', rigId: rig.id });
}
