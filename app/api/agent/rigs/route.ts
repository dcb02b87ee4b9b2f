import { agentRoute } from '@/lib/http/route';
import { authenticateAgent } from '@/lib/services/traffic/authenticate-agent';
import { listBoundRigs } from '@/lib/services/traffic/list-bound-rigs';

export const GET = agentRoute(authenticateAgent, ({ ctx }) => listBoundRigs({ ctx }));
