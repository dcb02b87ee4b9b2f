import type { NextAuthOptions, User } from 'next-auth';
import Credentials from 'next-auth/providers/credentials';
import { webEnv } from '@/lib/env/web';
import { EllwandError } from '@/lib/errors';
import { verifySignIn } from '@/lib/services/people/verify-sign-in';
import { systemContext } from './context';
import { cookieNames } from './cookies';
import { addressOf } from './peer-address';
import { SESSION_MAX_AGE_S } from './session-token';

interface SignedIn extends User {
  sessionEpoch: number;
}

/** next-auth carries only a text to the sign-in page: the error's code. */
async function signIn(input: unknown, headers: Record<string, unknown>): Promise<SignedIn> {
  const ctx = systemContext();
  try {
    const person = await verifySignIn({ ctx, input, address: addressOf(headers) });
    return {
      id: person.personId,
      name: person.name,
      email: person.email,
      sessionEpoch: person.sessionEpoch,
    };
  } catch (error) {
    if (error instanceof EllwandError) throw new Error(error.code, { cause: error });
    console.error(`[${ctx.requestId}]`, error);
    throw new Error('unexpected', { cause: error });
  }
}

function cookiesOf(secure: boolean): NextAuthOptions['cookies'] {
  const names = cookieNames();
  const options = { httpOnly: true, sameSite: 'lax' as const, path: '/', secure };
  return {
    sessionToken: { name: names.session, options },
    csrfToken: { name: names.csrf, options },
    callbackUrl: { name: names.callback, options },
  };
}

/** next-auth: e-mail and password, an encrypted cookie that names the person and the epoch of their sessions. */
export function authOptions(): NextAuthOptions {
  const { authSecret, publicUrl } = webEnv();
  return {
    secret: authSecret,
    cookies: cookiesOf(publicUrl.startsWith('https://')),
    session: { strategy: 'jwt', maxAge: SESSION_MAX_AGE_S },
    pages: { signIn: '/sign-in', error: '/sign-in' },
    providers: [
      Credentials({
        name: 'E-mail and password',
        credentials: { email: { type: 'email' }, password: { type: 'password' } },
        authorize: (credentials, request) => signIn(credentials, request.headers ?? {}),
      }),
    ],
    callbacks: {
      jwt: ({ token, user }) =>
        user ? { personId: user.id, epoch: (user as SignedIn).sessionEpoch, name: user.name } : token,
      session: ({ session, token }) => ({ expires: session.expires, user: { name: token.name } }),
    },
  };
}
