import { personRoute } from '@/lib/http/route';
import { listRigs } from '@/lib/services/floor/list-rigs';

export const GET = personRoute(async ({ ctx }) => ({ rigs: await listRigs({ ctx }) }));
