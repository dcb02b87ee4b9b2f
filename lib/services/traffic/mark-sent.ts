import { and, eq, inArray } from 'drizzle-orm';
import { commands } from '@/db/schema/traffic';
import { authoriseAgent } from '../authorise';
import type { ServiceContext } from '../context';

/**
 * Claims pending commands for one stream, just before they are written to it, and tells which may be written: of two
 * streams of one agent only one gets each.
 */
export async function markSent({
  ctx,
  commandIds,
}: {
  ctx: ServiceContext;
  commandIds: string[];
}): Promise<Set<string>> {
  const { agentId } = authoriseAgent(ctx);
  if (commandIds.length === 0) return new Set();
  const claimed = await ctx.db
    .update(commands)
    .set({ state: 'sent', sentAt: ctx.now })
    .where(
      and(
        inArray(commands.id, commandIds),
        eq(commands.agentId, agentId),
        inArray(commands.state, ['pending', 'sent']),
      ),
    )
    .returning({ id: commands.id });
  return new Set(claimed.map((row) => row.id));
}
