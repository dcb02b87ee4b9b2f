import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { repo } from '@/scripts/house/repo.mjs';
import { childEnvironment, readSettings } from '@/scripts/house/settings.mjs';
import { Trouble } from '@/scripts/house/trouble.mjs';

const demo = { demo: true };
const read = (env: Record<string, string>) => readSettings({ NODE_ENV: 'test', ...env }, demo);
const secrets = { session: 's'.repeat(64), databaseAdmin: 'a', database: 'd', redis: 'r' };

describe('the settings of a start', () => {
  it('are the published defaults when nothing is set', () => {
    expect(read({})).toMatchObject({
      port: 4300,
      host: '127.0.0.1',
      dbPort: 55432,
      redisPort: 56379,
      mailPort: 4325,
      dataDir: join(repo, '.data'),
      nextDist: '.next/main',
      publicUrl: 'http://127.0.0.1:4300',
    });
  });

  it('treat an empty setting as none', () => {
    expect(read({ PORT: '', ELLWAND_DATA_DIR: '', ELLWAND_HOST: '' })).toEqual(read({}));
  });

  it.each(['1', '65535'])('take port %s', (port) => {
    expect(read({ ELLWAND_DB_PORT: port }).dbPort).toBe(Number(port));
  });

  it.each(['0', '65536', 'x', '43.5', '-1', '1e3', ' 80'])(
    'refuse port "%s" by naming the setting',
    (port) => {
      expect(() => read({ ELLWAND_MAIL_PORT: port })).toThrow(Trouble);
      expect(() => read({ ELLWAND_MAIL_PORT: port })).toThrow(/^ELLWAND_MAIL_PORT=/);
    },
  );

  it('give each data folder a build of its own', () => {
    const builds = ['', 'one', 'two'].map((dataDir) => read({ ELLWAND_DATA_DIR: dataDir }).nextDist);
    expect(new Set(builds).size).toBe(3);
    expect(builds.every((build) => build.startsWith('.next/'))).toBe(true);
  });

  it('speak of an address that reaches a web which listens everywhere', () => {
    expect(read({ ELLWAND_HOST: '0.0.0.0', PORT: '80' }).publicUrl).toBe('http://127.0.0.1:80');
    expect(read({ ELLWAND_HOST: '::1' }).publicUrl).toBe('http://[::1]:4300');
    expect(read({ ELLWAND_URL: 'https://row.example' }).publicUrl).toBe('https://row.example');
  });

  it('tell two instances on one computer apart, since cookies ignore ports', () => {
    const [one, two] = ['4300', '4301'].map((PORT) => childEnvironment(repo, read({ PORT }), secrets));
    expect(one?.ELLWAND_INSTANCE).not.toBe(two?.ELLWAND_INSTANCE);
  });
});
