import { EllwandError } from '@/lib/errors';
import { may, type Right } from '@/lib/fleet/rights';
import type { AgentActor, PersonActor, ServiceContext, SystemActor } from './context';

/**
 * The person behind the request, if they hold the right.
 * @throws EllwandError `not-allowed` when they do not, or when no person is behind it.
 */
export function authorise(ctx: ServiceContext, right: Right): PersonActor {
  const { actor } = ctx;
  if (actor.kind !== 'person' || !may(actor.roles, right)) {
    throw new EllwandError('not-allowed', { details: { right } });
  }
  return actor;
}

/** The agent behind the request. @throws EllwandError `token-refused` when it is none. */
export function authoriseAgent(ctx: ServiceContext): AgentActor {
  if (ctx.actor.kind !== 'agent') throw new EllwandError('token-refused');
  return ctx.actor;
}

/** Work that only Ellwand itself does. @throws EllwandError `not-allowed` for anybody else. */
export function authoriseSystem(ctx: Pick<ServiceContext, 'actor'>): SystemActor {
  if (ctx.actor.kind !== 'system') throw new EllwandError('not-allowed');
  return ctx.actor;
}
