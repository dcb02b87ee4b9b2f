import { eq } from 'drizzle-orm';
import { agents } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { PROTOCOL_HEADER, PROTOCOL_VERSION } from '@/lib/protocol/version';
import { authoriseSystem } from '../authorise';
import type { AgentActor, ServiceContext } from '../context';
import { hashSecret, hashesMatch } from './secrets';

const BEARER = /^Bearer ([\w-]{20,200})$/;

function requireProtocol(headers: Headers): void {
  const heard = headers.get(PROTOCOL_HEADER);
  if (heard === String(PROTOCOL_VERSION)) return;
  throw new EllwandError('protocol-unknown', { details: { spoken: PROTOCOL_VERSION, heard } });
}

/**
 * The agent whose token the request bears.
 * @throws EllwandError `protocol-unknown` for another version, `token-refused` for no, a wrong or a revoked token.
 */
export async function authenticateAgent({
  ctx,
  request,
}: {
  ctx: ServiceContext;
  request: { headers: Headers };
}): Promise<AgentActor> {
  authoriseSystem(ctx);
  requireProtocol(request.headers);
  const token = BEARER.exec(request.headers.get('authorization') ?? '')?.[1];
  if (!token) throw new EllwandError('token-refused');
  const tokenHash = hashSecret(token);
  const [agent] = await ctx.db.select().from(agents).where(eq(agents.tokenHash, tokenHash));
  if (!agent?.tokenHash || !hashesMatch(agent.tokenHash, tokenHash)) throw new EllwandError('token-refused');
  if (agent.revokedAt) throw new EllwandError('token-refused', { details: { revoked: true } });
  return { kind: 'agent', agentId: agent.id, name: agent.name };
}
