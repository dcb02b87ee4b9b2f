import { once } from 'node:events';
import { createServer, get, type IncomingMessage } from 'node:http';
import type { AddressInfo } from 'node:net';
import { beforeAll, describe, expect, it } from 'vitest';
import { addressOf, stampPeerAddresses } from '@/lib/auth/peer-address';
import { setWebEnvironment } from '@/tests/support/web-env';

beforeAll(() => {
  setWebEnvironment();
  stampPeerAddresses();
});

/** What a server sees as the address of a request with these headers. */
async function seenAddress(headers: Record<string, string>): Promise<string> {
  const server = createServer((request, response) => response.end(addressOf(request.headers)));
  server.listen(0, '127.0.0.1');
  await once(server, 'listening');
  const { port } = server.address() as AddressInfo;
  const request = get({ host: '127.0.0.1', port, headers, agent: false });
  const [response] = (await once(request, 'response')) as [IncomingMessage];
  let text = '';
  for await (const chunk of response) text += String(chunk);
  server.close();
  return text;
}

describe('the address that sign-ins are limited by', () => {
  it('is the socket’s, whatever the client says of itself', async () => {
    const lies = { 'x-forwarded-for': '203.0.113.9', 'ellwand-peer': '203.0.113.9' };
    expect(await seenAddress(lies)).toBe('127.0.0.1');
  });
});
