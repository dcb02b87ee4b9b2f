import { eq } from 'drizzle-orm';
import type { Db } from '@/db/client';
import { agents } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { PROTOCOL_HEADER, PROTOCOL_VERSION } from '@/lib/protocol/version';
import type { AgentActor } from '../context';
import { hashSecret, hashesMatch } from './secrets';

const BEARER = /^Bearer ([\w-]{20,200})$/;

/** @throws EllwandError `protocol-unknown` unless the header names the version this server speaks. */
export function requireProtocol(headers: Headers): void {
  const spoken = headers.get(PROTOCOL_HEADER);
  if (spoken === String(PROTOCOL_VERSION)) return;
  throw new EllwandError('protocol-unknown', { details: { spoken: PROTOCOL_VERSION, heard: spoken } });
}

/**
 * The agent whose token the request bears.
 * @throws EllwandError `protocol-unknown` for another version, `token-refused` for no, a wrong or a revoked token.
 */
export async function authenticateAgent({ db, headers }: { db: Db; headers: Headers }): Promise<AgentActor> {
  requireProtocol(headers);
  const token = BEARER.exec(headers.get('authorization') ?? '')?.[1];
  if (!token) throw new EllwandError('token-refused');
  const tokenHash = hashSecret(token);
  const [agent] = await db.select().from(agents).where(eq(agents.tokenHash, tokenHash));
  if (!agent?.tokenHash || !hashesMatch(agent.tokenHash, tokenHash)) throw new EllwandError('token-refused');
  if (agent.revokedAt) throw new EllwandError('token-refused', { details: { revoked: true } });
  return { kind: 'agent', agentId: agent.id, name: agent.name };
}
