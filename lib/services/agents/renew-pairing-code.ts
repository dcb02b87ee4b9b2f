import { eq } from 'drizzle-orm';
import { agents } from '@/db/schema/rigs';
import { agentIdSchema, type PairingOfferDto } from '@/lib/schemas/setup-agents';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { lockAgent } from './lock-agent';
import { makePairingCode, PAIRING_VALID_MS } from './pairing-code';

/** A new code for an agent that lost its token or was revoked. A token in use stays good until the code is used. */
export async function renewPairingCode({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<PairingOfferDto> {
  authorise(ctx, 'agents.write');
  const { agentId } = parseInput(agentIdSchema, input);
  const { code, hash } = makePairingCode();
  const expiresAt = new Date(ctx.now.getTime() + PAIRING_VALID_MS);
  return inTransaction(ctx, async (inner) => {
    const agent = await lockAgent(inner, agentId);
    await inner.db
      .update(agents)
      .set({ pairingCodeHash: hash, pairingExpiresAt: expiresAt, revokedAt: null })
      .where(eq(agents.id, agentId));
    await audit(inner, 'agent.renew-code', `agent:${agentId}`);
    return { agentId, agentName: agent.name, code, expiresAt: expiresAt.toISOString() };
  });
}
