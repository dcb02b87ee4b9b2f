import { createHash } from 'node:crypto';
import { and, eq, gt, inArray, sql } from 'drizzle-orm';
import { signInAttempts } from '@/db/schema/people';
import { EllwandError } from '@/lib/errors';
import type { ServiceContext } from '../context';
import { inTransaction } from '../transaction';

/** Refused sign-ins within the window, after which no more are looked at. */
export const SIGN_IN_WINDOW_MS = 10 * 60_000;
export const ATTEMPTS_PER_ACCOUNT_MAX = 5;
export const ATTEMPTS_PER_ADDRESS_MAX = 20;

/** Attempts are written before they are judged, so that many at once cannot slip through together. */
export interface ReservedAttempt {
  ids: number[];
}

/** What is stored is a digest: the table shall not keep what people mistype. */
function subjectOf(kind: 'account' | 'address', text: string): string {
  return `${kind}:${createHash('sha256').update(text).digest('hex').slice(0, 32)}`;
}

/**
 * Counts one more attempt for the account and the address.
 * @throws EllwandError `too-many-attempts` when either is at its limit; such an attempt is not counted, so the
 * wait ends ten minutes after the last judged one however often somebody tries meanwhile.
 */
export function reserveAttempt(
  ctx: ServiceContext,
  attempt: { email: string; address: string },
): Promise<ReservedAttempt> {
  // Always in this order: two reservations that share both subjects cannot wait for each other.
  const limits = [
    { subject: subjectOf('account', attempt.email), max: ATTEMPTS_PER_ACCOUNT_MAX },
    { subject: subjectOf('address', attempt.address), max: ATTEMPTS_PER_ADDRESS_MAX },
  ];
  return inTransaction(ctx, async (inner) => {
    for (const { subject, max } of limits) {
      await inner.db.execute(sql`select pg_advisory_xact_lock(hashtextextended(${subject}, 0))`);
      if ((await countSince(inner, subject)) >= max) throw new EllwandError('too-many-attempts');
    }
    const rows = limits.map(({ subject }) => ({ subject, at: ctx.now }));
    const stored = await inner.db.insert(signInAttempts).values(rows).returning({ id: signInAttempts.id });
    return { ids: stored.map((row) => row.id) };
  });
}

async function countSince(ctx: ServiceContext, subject: string): Promise<number> {
  const since = new Date(ctx.now.getTime() - SIGN_IN_WINDOW_MS);
  return ctx.db.$count(
    signInAttempts,
    and(eq(signInAttempts.subject, subject), gt(signInAttempts.at, since)),
  );
}

/** Takes back an attempt that turned out right. */
export async function forgiveAttempt(ctx: ServiceContext, { ids }: ReservedAttempt): Promise<void> {
  await ctx.db.delete(signInAttempts).where(inArray(signInAttempts.id, ids));
}
