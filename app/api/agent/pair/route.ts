import { openRoute } from '@/lib/http/route';
import { readJson } from '@/lib/http/read-json';
import { pairAgent } from '@/lib/services/traffic/pair-agent';

export const POST = openRoute(async ({ ctx, request }) => pairAgent({ ctx, input: await readJson(request) }));
