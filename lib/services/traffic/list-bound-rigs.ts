import { asc, desc, eq } from 'drizzle-orm';
import { profiles, rigs } from '@/db/schema/rigs';
import type { BoundRigs } from '@/lib/protocol/pairing';
import { authoriseAgent } from '../authorise';
import type { ServiceContext } from '../context';

/** The agent's rigs that have a profile, in bench order, each with the newest one. */
export async function listBoundRigs({ ctx }: { ctx: ServiceContext }): Promise<BoundRigs> {
  const { agentId } = authoriseAgent(ctx);
  const newest = ctx.db
    .selectDistinctOn([profiles.rigId], {
      rigId: profiles.rigId,
      version: profiles.version,
      profile: profiles.profile,
    })
    .from(profiles)
    .orderBy(profiles.rigId, desc(profiles.version))
    .as('newest');
  const bound = await ctx.db
    .select({
      rigId: rigs.id,
      name: rigs.name,
      fence: rigs.fence,
      profileVersion: newest.version,
      profile: newest.profile,
    })
    .from(rigs)
    .innerJoin(newest, eq(newest.rigId, rigs.id))
    .where(eq(rigs.agentId, agentId))
    .orderBy(asc(rigs.benchOrder));
  return { rigs: bound };
}
