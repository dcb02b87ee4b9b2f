import { eq } from 'drizzle-orm';
import { agents } from '@/db/schema/rigs';
import { agentIdSchema } from '@/lib/schemas/setup-agents';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { tell } from '../tell';
import { inTransaction } from '../transaction';
import { lockAgent } from './lock-agent';

/** Takes an agent's token and code away: refused from the next request on, its open stream ends with the news. */
export async function revokeAgent({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  authorise(ctx, 'agents.write');
  const { agentId } = parseInput(agentIdSchema, input);
  return inTransaction(ctx, async (inner) => {
    await lockAgent(inner, agentId);
    await inner.db
      .update(agents)
      .set({ tokenHash: null, pairingCodeHash: null, pairingExpiresAt: null, revokedAt: ctx.now })
      .where(eq(agents.id, agentId));
    await audit(inner, 'agent.revoke', `agent:${agentId}`);
    await tell(inner, { news: 'agent', agentId });
  });
}
