import { personRoute } from '@/lib/http/route';
import { readRigPage } from '@/lib/services/floor/read-rig-page';

export const GET = personRoute<{ rigId: string }>(({ ctx, params }) => readRigPage({ ctx, input: params }));
