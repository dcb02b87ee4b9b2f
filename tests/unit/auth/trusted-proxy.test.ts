import { beforeAll, describe, expect, it } from 'vitest';
import { addressOf } from '@/lib/auth/peer-address';
import { setWebEnvironment } from '@/tests/support/web-env';

beforeAll(() => setWebEnvironment({ trustProxy: true }));

describe('behind a proxy that we trust', () => {
  it('is the last address of the header, as the proxy adds it behind what the client wrote', () => {
    const headers = { 'ellwand-peer': '10.0.0.2', 'x-forwarded-for': '203.0.113.9, 198.51.100.7' };
    expect(addressOf(headers)).toBe('198.51.100.7');
  });

  it('is the socket’s when the proxy says nothing', () => {
    expect(addressOf({ 'ellwand-peer': '10.0.0.2' })).toBe('10.0.0.2');
  });
});
