import { and, eq, inArray } from 'drizzle-orm';
import { z } from 'zod';
import { commands } from '@/db/schema/traffic';
import { EllwandError } from '@/lib/errors';
import { commandAnswerSchema } from '@/lib/protocol/commands';
import { authoriseAgent } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { finishDrop } from '../runs/finish-drop';
import { tell } from '../tell';
import { inTransaction } from '../transaction';
import { parseSpoken } from './parse-spoken';

/**
 * Keeps the agent's answer to a command. The first answer stands, a second one changes nothing; an answer that comes
 * after the command expired is kept too, for it says what the rig did.
 * @throws EllwandError `not-found` for a command that is not this agent's.
 */
export async function answerCommand({
  ctx,
  commandId: id,
  input,
}: {
  ctx: ServiceContext;
  commandId: string;
  input: unknown;
}): Promise<void> {
  const { agentId } = authoriseAgent(ctx);
  const commandId = parseInput(z.uuid(), id);
  const answer = parseSpoken(commandAnswerSchema, input);
  await inTransaction(ctx, async (inner) => {
    const mine = and(eq(commands.id, commandId), eq(commands.agentId, agentId));
    const [answered] = await inner.db
      .update(commands)
      .set({ state: answer.outcome, answer, answeredAt: inner.now })
      .where(and(mine, inArray(commands.state, ['pending', 'sent', 'expired'])))
      .returning({ command: commands.command });
    if (!answered) {
      const [known] = await inner.db.select({ id: commands.id }).from(commands).where(mine);
      if (!known) throw new EllwandError('not-found');
      return;
    }
    const { command } = answered;
    // "Dropped" is the agent's word that the lot is free, told by its answer and by its journal.
    if (command.kind === 'drop-program' && answer.outcome === 'done') await finishDrop(inner, command.runId);
    await tell(inner, { news: 'command-answered', commandId });
  });
}
