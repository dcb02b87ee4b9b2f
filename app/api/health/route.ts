import { healthWithin } from '@/lib/http/health';

export const dynamic = 'force-dynamic';

/** 200 when everything that cutting needs is there, else 503; open to anybody, it tells no more than that. */
export async function GET(): Promise<Response> {
  const health = await healthWithin();
  return Response.json(health, { status: health.ok ? 200 : 503, headers: { 'cache-control': 'no-store' } });
}
