import { webEnv } from '@/lib/env/web';

/** Cookies ignore ports, so their names carry the instance; two of them on one computer keep apart. */
export function cookieNames(): { session: string; csrf: string; callback: string } {
  const prefix = `ellwand-${webEnv().instance}`;
  return { session: `${prefix}.session`, csrf: `${prefix}.csrf`, callback: `${prefix}.callback` };
}

/** The value of one cookie in a `Cookie` header. */
export function cookieValue(header: string | null, name: string): string | undefined {
  for (const part of header?.split(';') ?? []) {
    const [key, ...value] = part.trim().split('=');
    if (key === name) return decodeURIComponent(value.join('='));
  }
  return undefined;
}
