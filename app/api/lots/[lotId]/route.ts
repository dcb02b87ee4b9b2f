import { personRoute } from '@/lib/http/route';
import { readLot } from '@/lib/services/lots/read-lot';

export const GET = personRoute<{ lotId: string }>(({ ctx, params }) => readLot({ ctx, input: params }));
