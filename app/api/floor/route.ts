import { personRoute } from '@/lib/http/route';
import { readFloor } from '@/lib/services/floor/read-floor';

export const GET = personRoute(({ ctx }) => readFloor({ ctx }));
