import { cookies } from 'next/headers';
import type { PersonActor } from '@/lib/services/context';
import { findSessionActor } from '@/lib/services/people/find-session-actor';
import { cookieNames, cookieValue } from './cookies';
import { database } from './database';
import { readSessionToken } from './session-token';

/** Who is signed in, for server components and actions; checked against the person's row each time. */
export async function currentActor(): Promise<PersonActor | null> {
  const jar = await cookies();
  const session = await readSessionToken(jar.get(cookieNames().session)?.value);
  return findSessionActor({ db: database(), session });
}

/** Who is signed in, for route handlers. */
export async function actorOfRequest(request: Request): Promise<PersonActor | null> {
  const token = cookieValue(request.headers.get('cookie'), cookieNames().session);
  return findSessionActor({ db: database(), session: await readSessionToken(token) });
}

/**
 * The question "is this session still good?" for a stream that outlives its request; ask it again on `person` news.
 * Holds the session, not the roles.
 */
export function sessionWatch(request: Request): () => Promise<PersonActor | null> {
  const token = cookieValue(request.headers.get('cookie'), cookieNames().session);
  return async () => findSessionActor({ db: database(), session: await readSessionToken(token) });
}
