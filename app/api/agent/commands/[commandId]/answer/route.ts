import { readJson } from '@/lib/http/read-json';
import { agentRoute } from '@/lib/http/route';
import { answerCommand } from '@/lib/services/traffic/answer-command';
import { authenticateAgent } from '@/lib/services/traffic/authenticate-agent';

export const POST = agentRoute<{ commandId: string }>(authenticateAgent, async ({ ctx, params, request }) =>
  answerCommand({ ctx, commandId: params.commandId, input: await readJson(request) }),
);
