import { serviceContext, systemContext } from '@/lib/auth/context';
import { agentRoute } from '@/lib/http/route';
import { streamResponse } from '@/lib/live/answer';
import { liveHub } from '@/lib/live/web-hub';
import { authenticateAgent } from '@/lib/services/traffic/authenticate-agent';
import { takeCommands } from '@/lib/services/traffic/take-commands';

export const dynamic = 'force-dynamic';

/** The agent's command stream: newline-delimited JSON, open until the token is revoked or the agent goes. */
export const GET = agentRoute(authenticateAgent, async ({ ctx, request }) => {
  const { actor } = ctx;
  const { headers } = request;
  const body = liveHub().openAgent({
    agentId: actor.agentId,
    takeCommands: (again) => takeCommands({ ctx: serviceContext(actor), again }),
    authenticate: () => authenticateAgent({ ctx: systemContext(), request: { headers } }),
    nowMs: () => Date.now(),
    onFailed: (cause) => console.error(`[${ctx.requestId}] command stream of ${actor.name}:`, cause),
  });
  return streamResponse(body, 'application/x-ndjson');
});
