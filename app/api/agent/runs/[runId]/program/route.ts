import { agentRoute } from '@/lib/http/route';
import { authenticateRecentAgent } from '@/lib/services/traffic/authenticate-recent-agent';
import { readRunProgram } from '@/lib/services/traffic/read-run-program';

export const GET = agentRoute<{ runId: string }>(authenticateRecentAgent, ({ ctx, params }) =>
  readRunProgram({ ctx, input: params }),
);
