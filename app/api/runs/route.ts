import { personRoute } from '@/lib/http/route';
import { listRuns } from '@/lib/services/floor/list-runs';

export const GET = personRoute(async ({ ctx, request }) => ({
  runs: await listRuns({ ctx, input: Object.fromEntries(new URL(request.url).searchParams) }),
}));
