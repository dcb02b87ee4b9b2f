import { and, eq, inArray } from 'drizzle-orm';
import { commands } from '@/db/schema/traffic';
import type { ServiceContext } from '../context';
import { tell } from '../tell';

/**
 * Takes back what a person asked for and no agent has got yet, as when they are disabled; part of the caller's
 * transaction. Stops and holds are not taken back: stopping always works.
 */
export async function withdrawCommands(ctx: ServiceContext, personId: string): Promise<void> {
  const withdrawn = await ctx.db
    .update(commands)
    .set({ state: 'expired' })
    .where(
      and(
        eq(commands.personId, personId),
        eq(commands.state, 'pending'),
        inArray(commands.kind, ['start-run', 'go-on', 'show-code', 'settle-piece', 'end-work-hold']),
      ),
    )
    .returning({ id: commands.id });
  for (const { id } of withdrawn) await tell(ctx, { news: 'command-answered', commandId: id });
}
