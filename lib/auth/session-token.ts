import { decode } from 'next-auth/jwt';
import { webEnv } from '@/lib/env/web';

/** A session is worth this long after its last renewal: a week on a tablet that stays at the bench. */
export const SESSION_MAX_AGE_S = 7 * 24 * 3600;

/** What stands in the encrypted session cookie. Roles do not: they are read from the person each time. */
export interface Session {
  personId: string;
  epoch: number;
}

/** Reads the cookie's value; `null` for none, a foreign, a damaged or an expired one. */
export async function readSessionToken(token: string | undefined): Promise<unknown> {
  if (!token) return null;
  try {
    return await decode({ token, secret: webEnv().authSecret });
  } catch {
    return null;
  }
}
