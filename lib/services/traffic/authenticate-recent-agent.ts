import { EllwandError } from '@/lib/errors';
import { isRecentAgent, LEAST_AGENT_VERSION, SOFTWARE_HEADER } from '@/lib/protocol/version';
import type { AgentActor, ServiceContext } from '../context';
import { authenticateAgent } from './authenticate-agent';

/**
 * The agent whose token the request bears, for what a run begins with: its rigs and its program. An agent that is too
 * old may report, hand over what it counted and be stopped; it is given nothing to start.
 * @throws EllwandError `agent-too-old`, and as `authenticateAgent` does
 */
export async function authenticateRecentAgent({
  ctx,
  request,
}: {
  ctx: ServiceContext;
  request: { headers: Headers };
}): Promise<AgentActor> {
  const actor = await authenticateAgent({ ctx, request });
  const heard = request.headers.get(SOFTWARE_HEADER);
  if (isRecentAgent(heard)) return actor;
  throw new EllwandError('agent-too-old', { details: { least: LEAST_AGENT_VERSION, heard } });
}
