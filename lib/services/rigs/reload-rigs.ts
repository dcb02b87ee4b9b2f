import { and, asc, eq, isNotNull } from 'drizzle-orm';
import { agents, rigs } from '@/db/schema/rigs';
import type { PersonActor, ServiceContext } from '../context';
import { tell } from '../tell';
import { issueCommand } from '../traffic/issue-command';

/**
 * Has an agent read its rigs and their profiles again. One that is not paired reads them when it is; one without a
 * rig has nothing to read, and the fences keep it off those it had.
 */
export async function reloadRigs(ctx: ServiceContext<PersonActor>, agentId: string): Promise<void> {
  await tell(ctx, { news: 'agent', agentId });
  const [rig] = await ctx.db
    .select({ id: rigs.id })
    .from(rigs)
    .innerJoin(agents, eq(agents.id, rigs.agentId))
    .where(and(eq(rigs.agentId, agentId), isNotNull(agents.tokenHash)))
    .orderBy(asc(rigs.benchOrder))
    .limit(1);
  if (rig) await issueCommand(ctx, ctx.actor.personId, { kind: 'reload-rigs', rigId: rig.id });
}
