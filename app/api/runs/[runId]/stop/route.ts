import { personRoute } from '@/lib/http/route';
import { stopRun } from '@/lib/services/runs/stop-run';

export const POST = personRoute<{ runId: string }>(({ ctx, params }) => stopRun({ ctx, input: params }));
