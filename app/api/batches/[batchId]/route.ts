import { personRoute } from '@/lib/http/route';
import { readBatch } from '@/lib/services/batches/read-batch';

export const GET = personRoute<{ batchId: string }>(({ ctx, params }) => readBatch({ ctx, input: params }));
