import { agents } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { addAgentSchema, type PairingOfferDto } from '@/lib/schemas/setup-agents';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { bindTo } from './bind';
import { makePairingCode, PAIRING_VALID_MS } from './pairing-code';

/**
 * Adds an agent with its rigs and answers its pairing code, which nobody can read again.
 * `validMs` is longer than usual only where no person carries the code (the demo).
 * @throws EllwandError `already-exists` for a name that is taken, `rig-busy` when a rig has a run.
 */
export async function addAgent({
  ctx,
  input,
  validMs = PAIRING_VALID_MS,
}: {
  ctx: ServiceContext;
  input: unknown;
  validMs?: number;
}): Promise<PairingOfferDto> {
  const actor = authorise(ctx, 'agents.write');
  const { name, rigIds } = parseInput(addAgentSchema, input);
  const { code, hash } = makePairingCode();
  const expiresAt = new Date(ctx.now.getTime() + validMs);
  return inTransaction({ ...ctx, actor }, async (inner) => {
    const [agent] = await inner.db
      .insert(agents)
      .values({ name, pairingCodeHash: hash, pairingExpiresAt: expiresAt, createdAt: ctx.now })
      .returning({ id: agents.id });
    if (!agent) throw new EllwandError('unexpected');
    await bindTo(inner, agent.id, rigIds);
    await audit(inner, 'agent.add', `agent:${agent.id}`, { name, rigIds });
    return { agentId: agent.id, agentName: name, code, expiresAt: expiresAt.toISOString() };
  });
}
