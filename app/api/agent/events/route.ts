import { readJson } from '@/lib/http/read-json';
import { agentRoute } from '@/lib/http/route';
import { authenticateAgent } from '@/lib/services/traffic/authenticate-agent';
import { ingestEvents } from '@/lib/services/traffic/ingest-events';

export const POST = agentRoute(authenticateAgent, async ({ ctx, request }) =>
  ingestEvents({ ctx, input: await readJson(request) }),
);
