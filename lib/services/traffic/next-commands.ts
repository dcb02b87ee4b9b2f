import { and, asc, eq, gt, inArray, isNull, notInArray, or } from 'drizzle-orm';
import { commands } from '@/db/schema/traffic';
import type { Command, CommandKind } from '@/lib/protocol/commands';
import { authoriseAgent } from '../authorise';
import type { ServiceContext } from '../context';

const MOVING: CommandKind[] = ['start-run', 'go-on'];

/**
 * Commands that the agent has not answered, oldest first. `fresh`: those never sent. `all`, at the start of a stream:
 * the sent ones too, whose answer may be lost, but never a moving one twice.
 */
export async function nextCommands({
  ctx,
  which,
}: {
  ctx: ServiceContext;
  which: 'fresh' | 'all';
}): Promise<Command[]> {
  const { agentId } = authoriseAgent(ctx);
  const again = and(eq(commands.state, 'sent'), notInArray(commands.kind, MOVING));
  const open = await ctx.db
    .select({ command: commands.command })
    .from(commands)
    .where(
      and(
        eq(commands.agentId, agentId),
        inArray(commands.state, ['pending', 'sent']),
        or(eq(commands.state, 'pending'), which === 'all' ? again : undefined),
        or(isNull(commands.expiresAt), gt(commands.expiresAt, ctx.now)),
      ),
    )
    .orderBy(asc(commands.issuedAt), asc(commands.id));
  return open.map((row) => row.command);
}
