import { mkdtempSync, readFileSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { drizzle } from 'drizzle-orm/node-postgres';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { loadConfig } from '@/agent/config';
import { readBench } from '@/agent/virtual/config';
import { DEMO_RIGS } from '@/db/seed/demo/rigs';
import { refreshDemoFiles } from '@/db/seed/files';
import { seedDemo } from '@/db/seed/seed';
import { ROLES } from '@/lib/fleet/rights';
import { checkProgram } from '@/lib/program/check';
import { generateProgram } from '@/lib/program/generate';
import { profileSchema } from '@/lib/program/profile';
import { verifySignIn } from '@/lib/services/people/verify-sign-in';
import { openTestDatabase, type TestDatabase } from '@/tests/support/database';

const now = new Date('2026-12-01T08:00:00Z');
let database: TestDatabase;
let place: { dataDir: string; serverUrl: string; rigSpeed: number };

const db = () => drizzle(database.pool, { casing: 'snake_case' });
const readJson = (name: string): unknown =>
  JSON.parse(readFileSync(join(place.dataDir, 'demo', name), 'utf8'));

beforeAll(async () => {
  database = await openTestDatabase();
  place = {
    dataDir: mkdtempSync(join(tmpdir(), 'ellwand-seed-')),
    serverUrl: 'http://127.0.0.1:4300',
    rigSpeed: 2,
  };
});

afterAll(async () => {
  await database.close();
  rmSync(place.dataDir, { recursive: true, force: true });
});

describe('the demo', () => {
  it('fills an empty database, and a filled one never again', async () => {
    expect(await seedDemo(db(), place, now)).toBe(true);
    expect(await seedDemo(db(), place, now)).toBe(false);
    const { rows } = await database.pool.query(
      `select (select count(*) from rigs)::int as rigs, (select count(*) from people)::int as people,
              (select count(*) from agents)::int as agents,
              (select sum(pieces) from lots where state = 'waiting')::int as pieces`,
    );
    expect(rows).toEqual([{ rigs: 8, people: 4, agents: 2, pieces: 2026 }]);
  });

  it('leaves accounts of all four roles that sign in, in a file only its owner reads', async () => {
    const file = readJson('accounts.json') as {
      password: string;
      accounts: { email: string; roles: string[] }[];
    };
    expect(statSync(join(place.dataDir, 'demo', 'accounts.json')).mode & 0o777).toBe(0o600);
    expect(file.accounts.map(({ roles }) => roles[0]).sort()).toEqual([...ROLES].sort());
    for (const { email } of file.accounts) {
      const ctx = { actor: { kind: 'system' as const }, db: db(), now, requestId: 'test' };
      const person = await verifySignIn({ ctx, input: { email, password: file.password }, address: 'test' });
      expect(person.email).toBe(email);
    }
  });

  it('leaves configurations that the agents and the virtual rigs accept, port for port', async () => {
    const agents = await Promise.all(
      [1, 2].map((index) => loadConfig(join(place.dataDir, 'demo', `agent-${index}.json`))),
    );
    const bench = readBench(join(place.dataDir, 'demo', 'rigs.json'));
    const ports = agents.flatMap((agent) => agent.rigs.map(({ rig, port }) => `${rig} ${port}`));
    expect(ports.sort()).toEqual(bench.map(({ name, tty }) => `${name} ${tty}`).sort());
    expect(agents[0]?.server).toBe(place.serverUrl);
  });

  it('follows a changed address and keeps the pairing codes', async () => {
    const before = readJson('agent-1.json') as { pairingCode: string };
    refreshDemoFiles({ ...place, serverUrl: 'http://127.0.0.1:4777' });
    expect(readJson('agent-1.json')).toMatchObject({
      server: 'http://127.0.0.1:4777',
      pairingCode: before.pairingCode,
    });
  });

  it.each(DEMO_RIGS.map((rig) => [rig.name, rig] as const))(
    'gives %s a profile whose programs pass the check',
    (_name, rig) => {
      const profile = profileSchema.parse(rig.profile);
      const order = { tag: 1, pieces: 3, lengthMm: 177.8 };
      expect(checkProgram(generateProgram(profile, order).text, profile, order)).toEqual([]);
    },
  );

  it('leaves nothing behind when the files cannot be written', async () => {
    const other = await openTestDatabase();
    const unwritable = { ...place, dataDir: join(place.dataDir, 'demo', 'accounts.json') };
    const failing = seedDemo(drizzle(other.pool, { casing: 'snake_case' }), unwritable, now);
    await expect(failing).rejects.toThrow();
    const { rows } = await other.pool.query('select 1 from people');
    await other.close();
    expect(rows).toEqual([]);
  });
});
