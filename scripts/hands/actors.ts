import { randomUUID } from 'node:crypto';
import type { Db } from '@/db/client';
import type { PersonActor, ServiceContext } from '@/lib/services/context';
import { findSessionActor } from '@/lib/services/people/find-session-actor';
import { verifySignIn } from '@/lib/services/people/verify-sign-in';

/** Gives the context of one call, with the time of that call. */
export type ContextNow = () => ServiceContext<PersonActor>;

/** A person of the demo, with the rights of their session. @throws Error when there is no such session */
export async function actAs(db: Db, account: { email: string; password: string }): Promise<ContextNow> {
  const own = () => ({ db, now: new Date(), requestId: `bench-${randomUUID()}` });
  const ctx = { ...own(), actor: { kind: 'system' as const } };
  const { personId, sessionEpoch } = await verifySignIn({ ctx, input: account, address: '127.0.0.1' });
  const actor = await findSessionActor({ db, session: { personId, epoch: sessionEpoch } });
  if (!actor) throw new Error(`${account.email} has no session`);
  return () => ({ ...own(), actor });
}
