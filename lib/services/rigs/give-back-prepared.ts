import { and, eq } from 'drizzle-orm';
import type { rigs } from '@/db/schema/rigs';
import { runs } from '@/db/schema/runs';
import type { PersonActor, ServiceContext } from '../context';
import { askForDrop } from '../runs/drop-run';

/**
 * Asks a rig to give back the lot that has not begun on it, because what its program was made for holds no more.
 * The lot is free when the agent says so (law 4); part of the caller's transaction.
 */
export async function giveBackPrepared(
  ctx: ServiceContext<PersonActor>,
  rig: typeof rigs.$inferSelect,
): Promise<void> {
  if (!rig.agentId) return;
  const [prepared] = await ctx.db
    .select({ id: runs.id })
    .from(runs)
    .where(and(eq(runs.rigId, rig.id), eq(runs.state, 'prepared')));
  if (prepared) await askForDrop(ctx, ctx.actor.personId, prepared.id);
}
