import { and, inArray, lte } from 'drizzle-orm';
import { commands } from '@/db/schema/traffic';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { tell } from '../tell';
import { inTransaction } from '../transaction';

/** Marks what was not answered in time; called every other second by the worker. Returns how many it were. */
export async function expireCommands({ ctx }: { ctx: ServiceContext }): Promise<number> {
  authoriseSystem(ctx);
  return inTransaction(ctx, async (inner) => {
    const expired = await inner.db
      .update(commands)
      .set({ state: 'expired' })
      .where(and(inArray(commands.state, ['pending', 'sent']), lte(commands.expiresAt, inner.now)))
      .returning({ id: commands.id });
    for (const { id } of expired) await tell(inner, { news: 'command-answered', commandId: id });
    return expired.length;
  });
}
