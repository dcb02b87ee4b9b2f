import { randomBytes } from 'node:crypto';
import type { Actor, ServiceContext, SystemActor } from '@/lib/services/context';
import { database } from './database';

/** The number that a person can read out and the log can be searched for. */
export function newRequestId(): string {
  return randomBytes(6).toString('hex');
}

/** What a service is handed for one request of `actor`: the process's database, the time now, the request's number. */
export function serviceContext<A extends Actor>(actor: A, requestId = newRequestId()): ServiceContext<A> {
  return { actor, db: database(), now: new Date(), requestId };
}

/** For what Ellwand does before it knows who asks: signing in, the first owner, its own health. */
export function systemContext(requestId = newRequestId()): ServiceContext<SystemActor> {
  return serviceContext({ kind: 'system' }, requestId);
}
