import { signIn } from 'next-auth/react';
import { ERRORS, type ErrorCode } from '@/lib/errors';

/** Signs in with next-auth. Answers the title of what was wrong, or `null` when it was right. */
export async function trySignIn(email: string, password: string): Promise<string | null> {
  const answer = await signIn('credentials', { email, password, redirect: false }).catch(() => undefined);
  if (!answer) return ERRORS['service-away'].title;
  if (answer.ok && !answer.error) return null;
  const code = answer.error ?? '';
  return code in ERRORS ? ERRORS[code as ErrorCode].title : ERRORS['sign-in-refused'].title;
}
