import { and, eq, gt, isNull } from 'drizzle-orm';
import { agents } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { type PairingAnswer, pairingSchema } from '@/lib/protocol/pairing';
import { audit } from '../audit';
import type { ServiceContext } from '../context';
import { tell } from '../tell';
import { inTransaction } from '../transaction';
import { parseSpoken } from './parse-spoken';
import { hashSecret, hashesMatch, newToken, plainCode } from './secrets';

/** The agent that was paired with a token before: its first answer was lost on the way. */
async function pairedBefore(ctx: ServiceContext, token: string): Promise<PairingAnswer | null> {
  const [agent] = await ctx.db
    .select({ id: agents.id, name: agents.name })
    .from(agents)
    .where(and(eq(agents.tokenHash, hashSecret(token)), isNull(agents.revokedAt)));
  return agent ? { agentId: agent.id, name: agent.name, token } : null;
}

/**
 * Trades a one-time code for a token, the agent's own or a new one that is told this once. The code is used up by it;
 * asked again with the same token the answer is the same.
 * @throws EllwandError `pairing-refused` for a code that is wrong, used or too old.
 */
export async function pairAgent({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<PairingAnswer> {
  const { code, software, token: proposed } = parseSpoken(pairingSchema, input);
  const codeHash = hashSecret(plainCode(code));
  const token = proposed ?? newToken();
  return inTransaction(ctx, async (inner) => {
    const before = proposed === undefined ? null : await pairedBefore(inner, proposed);
    if (before) return before;
    const [agent] = await inner.db
      .select()
      .from(agents)
      .where(
        and(
          eq(agents.pairingCodeHash, codeHash),
          gt(agents.pairingExpiresAt, inner.now),
          isNull(agents.revokedAt),
        ),
      )
      .for('update');
    if (!agent?.pairingCodeHash || !hashesMatch(agent.pairingCodeHash, codeHash)) {
      throw new EllwandError('pairing-refused');
    }
    await inner.db
      .update(agents)
      .set({
        tokenHash: hashSecret(token),
        pairingCodeHash: null,
        pairingExpiresAt: null,
        pairedAt: inner.now,
        software,
      })
      .where(eq(agents.id, agent.id));
    await audit(inner, 'agent.paired', `agent:${agent.id}`, { software });
    await tell(inner, { news: 'agent', agentId: agent.id });
    return { agentId: agent.id, name: agent.name, token };
  });
}
