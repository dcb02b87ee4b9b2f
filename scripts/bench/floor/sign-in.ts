import { z } from 'zod';

const csrfSchema = z.object({ csrfToken: z.string() });

/** One cookie of the web's, as a browser takes it. */
export interface Cookie {
  name: string;
  value: string;
}

function cookiesOf(response: Response): Cookie[] {
  return response.headers.getSetCookie().map((line) => {
    const [pair = ''] = line.split(';');
    const at = pair.indexOf('=');
    return { name: pair.slice(0, at), value: pair.slice(at + 1) };
  });
}

/** As the `Cookie` header of a request. */
export function cookieHeader(cookies: readonly Cookie[]): string {
  return cookies.map(({ name, value }) => `${name}=${value}`).join('; ');
}

/** Signs in as the sign-in page does. Answers the session's cookies. @throws Error when the web refuses */
export async function signIn(url: string, account: { email: string; password: string }): Promise<Cookie[]> {
  const asked = await fetch(`${url}/api/auth/csrf`);
  const { csrfToken } = csrfSchema.parse(await asked.json());
  const before = cookiesOf(asked);
  const answer = await fetch(`${url}/api/auth/callback/credentials`, {
    method: 'POST',
    redirect: 'manual',
    headers: { cookie: cookieHeader(before) },
    body: new URLSearchParams({ csrfToken, json: 'true', ...account }),
  });
  const session = cookiesOf(answer).filter(({ name }) => name.endsWith('.session'));
  if (session.length === 0) throw new Error(`The web did not let ${account.email} in: ${answer.status}`);
  return [...before.filter(({ name }) => !name.endsWith('.session')), ...session];
}
