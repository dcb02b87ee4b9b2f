import { personRoute } from '@/lib/http/route';
import { pauseRun } from '@/lib/services/runs/pause-run';

export const POST = personRoute<{ runId: string }>(({ ctx, params }) => pauseRun({ ctx, input: params }));
