import { beforeAll, describe, expect, it, vi } from 'vitest';
import { cookieValue } from '@/lib/auth/cookies';
import { EllwandError } from '@/lib/errors';
import { problemOf } from '@/lib/http/problem';
import { readJson } from '@/lib/http/read-json';
import { requireSameOrigin } from '@/lib/http/same-origin';
import { setWebEnvironment } from '@/tests/support/web-env';

beforeAll(() => setWebEnvironment());

const post = (headers: Record<string, string>, body?: string) =>
  new Request('http://127.0.0.1:4300/api/x', { method: 'POST', headers, body });

describe('a writing request', () => {
  it.each([
    ['our own host', { origin: 'http://bench.local:4300', host: 'bench.local:4300' }],
    ['our public address behind a proxy', { origin: 'http://ellwand.example:4300', host: '10.0.0.2' }],
  ])('is taken from %s', (_case, headers) => {
    expect(() => requireSameOrigin(post(headers))).not.toThrow();
  });

  it.each([
    ['another site', { origin: 'http://elsewhere.example', host: 'bench.local:4300' }],
    ['another port of the same host', { origin: 'http://bench.local:4301', host: 'bench.local:4300' }],
    ['no origin', { host: 'bench.local:4300' }],
    ['an opaque origin', { origin: 'null', host: 'bench.local:4300' }],
  ])('is refused from %s', (_case, headers) => {
    expect(() => requireSameOrigin(post(headers as Record<string, string>))).toThrow(EllwandError);
  });

  it('is read no further than its limit', async () => {
    await expect(readJson(post({}, '"123456789"'), 10)).rejects.toMatchObject({ code: 'file-too-large' });
    expect(await readJson(post({}, '"12345678"'), 10)).toBe('12345678');
    await expect(readJson(post({}, '{'), 10)).rejects.toMatchObject({ code: 'bad-input' });
  });
});

describe('a problem', () => {
  it('keeps the code, the fields and the words of our own errors', () => {
    const fields = [{ path: 'name', message: 'Enter a name.' }];
    expect(problemOf(new EllwandError('bad-input', { fields }), 'r1')).toMatchObject({
      status: 400,
      code: 'bad-input',
      fields,
      requestId: 'r1',
    });
  });

  it('tells nothing of any other error, and logs it under the same number', () => {
    const log = vi.spyOn(console, 'error').mockReturnValue(undefined);
    const error = new Error('password=hunter2');
    const body = problemOf(error, 'r2');
    expect(body).toMatchObject({ status: 500, code: 'unexpected', details: {} });
    expect(JSON.stringify(body)).not.toContain('hunter2');
    expect(log).toHaveBeenCalledWith('[r2]', error);
    log.mockRestore();
  });

  it.each(['ECONNREFUSED', '57P01', '53300', '08006'])('says that a part is away on %s', (code) => {
    const log = vi.spyOn(console, 'error').mockReturnValue(undefined);
    const cause = Object.assign(new Error('x'), { code });
    expect(problemOf(new Error('Failed query', { cause }), 'r3')).toMatchObject({
      status: 503,
      code: 'service-away',
    });
    log.mockRestore();
  });
});

describe('a cookie', () => {
  it('is found by its whole name among others, and decoded', () => {
    const header = 'a.session=1; session=2; b=x=y; c=%20';
    expect(cookieValue(header, 'session')).toBe('2');
    expect(cookieValue(header, 'b')).toBe('x=y');
    expect(cookieValue(header, 'c')).toBe(' ');
    expect(cookieValue(header, 'd')).toBeUndefined();
    expect(cookieValue(null, 'd')).toBeUndefined();
  });
});
