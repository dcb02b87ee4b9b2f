import { readJson } from '@/lib/http/read-json';
import { agentRoute } from '@/lib/http/route';
import { authenticateAgent } from '@/lib/services/traffic/authenticate-agent';
import { recordReport } from '@/lib/services/traffic/record-report';

export const POST = agentRoute(authenticateAgent, async ({ ctx, request }) =>
  recordReport({ ctx, input: await readJson(request) }),
);
