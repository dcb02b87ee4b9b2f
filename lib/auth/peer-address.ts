import { subscribe } from 'node:diagnostics_channel';
import type { IncomingMessage } from 'node:http';
import { webEnv } from '@/lib/env/web';

/** Set by us on every request that comes in, over whatever the client sent under this name. */
const PEER_HEADER = 'ellwand-peer';

/**
 * Writes the socket's address into each request's headers. The framework hands on a client's own `X-Forwarded-For`
 * unchecked and no socket, so the address is taken before it sees the request. Called once, at the start.
 */
export function stampPeerAddresses(): void {
  subscribe('http.server.request.start', (message) => {
    const { request } = message as { request: IncomingMessage };
    request.headers[PEER_HEADER] = request.socket.remoteAddress ?? 'unknown';
  });
}

/**
 * Where a request came from, for limits only. Behind a proxy (`ELLWAND_TRUST_PROXY=1`) the last entry of
 * `X-Forwarded-For`, which is the proxy's own; else the socket's address. Without the stamp all requests share one.
 */
export function addressOf(headers: Record<string, unknown>): string {
  const last = webEnv().trustProxy
    ? String(headers['x-forwarded-for'] ?? '')
        .split(',')
        .at(-1)
        ?.trim()
    : '';
  return last || String(headers[PEER_HEADER] ?? 'unknown');
}
