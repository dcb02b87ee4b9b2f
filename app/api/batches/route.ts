import { personRoute } from '@/lib/http/route';
import { listBatches } from '@/lib/services/batches/list-batches';

export const GET = personRoute(({ ctx, request }) =>
  listBatches({ ctx, input: Object.fromEntries(new URL(request.url).searchParams) }),
);
