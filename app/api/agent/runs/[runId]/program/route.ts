import { agentRoute } from '@/lib/http/route';
import { authenticateAgent } from '@/lib/services/traffic/authenticate-agent';
import { readRunProgram } from '@/lib/services/traffic/read-run-program';

export const GET = agentRoute<{ runId: string }>(authenticateAgent, ({ ctx, params }) =>
  readRunProgram({ ctx, input: params }),
);
