import { sessionWatch } from '@/lib/auth/current-actor';
import { personRoute } from '@/lib/http/route';
import { streamResponse } from '@/lib/live/answer';
import { liveHub } from '@/lib/live/web-hub';

export const dynamic = 'force-dynamic';

/** A browser's event stream: server-sent events, each a `LiveMessage`; open until the session ends. */
export const GET = personRoute(async ({ ctx, request }) => {
  const session = sessionWatch(request);
  const body = liveHub().openBrowser({
    personId: ctx.actor.personId,
    stands: async () => (await session()) !== null,
    onFailed: (cause) => console.error(`[${ctx.requestId}] event stream:`, cause),
  });
  return streamResponse(body, 'text/event-stream');
});
