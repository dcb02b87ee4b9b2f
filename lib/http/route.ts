import { newRequestId, serviceContext } from '@/lib/auth/context';
import { actorOfRequest } from '@/lib/auth/current-actor';
import { EllwandError } from '@/lib/errors';
import type { Actor, AgentActor, PersonActor, ServiceContext, SystemActor } from '@/lib/services/context';
import { problemResponse } from './problem';
import { requireSameOrigin } from './same-origin';

interface Call<A extends Actor, Params> {
  request: Request;
  params: Params;
  ctx: ServiceContext<A>;
}

/** Answers a `Response` as it is, `undefined` as 204 and anything else as JSON. */
type Handler<A extends Actor, Params> = (call: Call<A, Params>) => Promise<unknown>;
type RouteHandler<Params> = (request: Request, context: { params: Promise<Params> }) => Promise<Response>;
type FindActor<A extends Actor> = (request: Request, requestId: string) => Promise<A>;

/** Who is behind an agent's request; the service that knows tokens is handed in. */
export type AuthenticateAgent = (call: {
  ctx: ServiceContext<SystemActor>;
  request: Request;
}) => Promise<AgentActor>;

/** A route for people: signed in, and when it writes, from a page of our own. */
export function personRoute<Params = Record<string, never>>(
  handler: Handler<PersonActor, Params>,
): RouteHandler<Params> {
  return route(async (request) => {
    requireSameOrigin(request);
    const actor = await actorOfRequest(request);
    if (!actor) throw new EllwandError('not-signed-in');
    return actor;
  }, handler);
}

/** A route for agents: `authenticate` reads the bearer token and throws `token-refused`. */
export function agentRoute<Params = Record<string, never>>(
  authenticate: AuthenticateAgent,
  handler: Handler<AgentActor, Params>,
): RouteHandler<Params> {
  return route(
    (request, requestId) => authenticate({ ctx: serviceContext({ kind: 'system' }, requestId), request }),
    handler,
  );
}

/** A route for anybody. */
export function openRoute<Params = Record<string, never>>(
  handler: Handler<SystemActor, Params>,
): RouteHandler<Params> {
  return route(() => Promise.resolve({ kind: 'system' }), handler);
}

function route<A extends Actor, Params>(
  findActor: FindActor<A>,
  handler: Handler<A, Params>,
): RouteHandler<Params> {
  return async (request, context) => {
    const requestId = newRequestId();
    try {
      const actor = await findActor(request, requestId);
      const params = await context.params;
      return asResponse(await handler({ request, params, ctx: serviceContext(actor, requestId) }));
    } catch (error) {
      return problemResponse(error, requestId);
    }
  };
}

function asResponse(answer: unknown): Response {
  if (answer instanceof Response) return answer;
  if (answer === undefined) return new Response(null, { status: 204 });
  return Response.json(answer, { headers: { 'cache-control': 'no-store' } });
}
