import { webEnv } from '@/lib/env/web';
import { EllwandError } from '@/lib/errors';

const READING = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses a writing request that another site's page made a browser send. Browsers name the page's origin on every
 * such request, so one without an origin is refused too.
 * @throws EllwandError `not-allowed`
 */
export function requireSameOrigin(request: Request): void {
  if (READING.has(request.method)) return;
  const origin = request.headers.get('origin');
  const host = request.headers.get('host');
  const own = new URL(webEnv().publicUrl).host;
  const from = origin && URL.canParse(origin) ? new URL(origin).host : null;
  if (from !== null && (from === host || from === own)) return;
  throw new EllwandError('not-allowed', { details: { reason: 'foreign origin' } });
}
