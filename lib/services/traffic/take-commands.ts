import { and, eq, gt, isNull, notInArray, or } from 'drizzle-orm';
import { commands } from '@/db/schema/traffic';
import type { Command, CommandKind } from '@/lib/protocol/commands';
import { authoriseAgent } from '../authorise';
import type { ServiceContext } from '../context';

const MOVING: CommandKind[] = ['start-run', 'go-on'];

/**
 * Claims commands for a stream that will write them at once, oldest first: of two streams of one agent only one gets
 * each. `again`, at the start of a stream: those sent before and not answered come too, for the stream may have died
 * with them; but never a moving one twice.
 */
export async function takeCommands({
  ctx,
  again,
}: {
  ctx: ServiceContext;
  again: boolean;
}): Promise<Command[]> {
  const { agentId } = authoriseAgent(ctx);
  const sentBefore = and(eq(commands.state, 'sent'), notInArray(commands.kind, MOVING));
  const taken = await ctx.db
    .update(commands)
    .set({ state: 'sent', sentAt: ctx.now })
    .where(
      and(
        eq(commands.agentId, agentId),
        or(eq(commands.state, 'pending'), again ? sentBefore : undefined),
        or(isNull(commands.expiresAt), gt(commands.expiresAt, ctx.now)),
      ),
    )
    .returning({ command: commands.command, issuedAt: commands.issuedAt });
  return taken
    .sort((one, other) => one.issuedAt.getTime() - other.issuedAt.getTime())
    .map((row) => row.command);
}
