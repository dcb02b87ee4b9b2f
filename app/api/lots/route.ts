import { personRoute } from '@/lib/http/route';
import { listLots } from '@/lib/services/lots/list-lots';

export const GET = personRoute(({ ctx, request }) =>
  listLots({ ctx, input: Object.fromEntries(new URL(request.url).searchParams) }),
);
