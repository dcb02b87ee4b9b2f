import { personRoute } from '@/lib/http/route';
import { readRun } from '@/lib/services/floor/read-run';

export const GET = personRoute<{ runId: string }>(({ ctx, params }) => readRun({ ctx, input: params }));
