import { agentRoute } from '@/lib/http/route';
import { authenticateRecentAgent } from '@/lib/services/traffic/authenticate-recent-agent';
import { listBoundRigs } from '@/lib/services/traffic/list-bound-rigs';

export const GET = agentRoute(authenticateRecentAgent, ({ ctx }) => listBoundRigs({ ctx }));
