import { once } from 'node:events';
import { createServer, type AddressInfo, type Server, type Socket } from 'node:net';
import { drizzle } from 'drizzle-orm/node-postgres';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { healthWithin } from '@/lib/http/health';
import { readHealth } from '@/lib/services/health/read-health';
import { openTestDatabase, type TestDatabase } from '@/tests/support/database';
import { setWebEnvironment } from '@/tests/support/web-env';

const now = new Date('2026-12-01T08:00:00Z');
const ago = (ms: number) => new Date(now.getTime() - ms);
let database: TestDatabase;
let mute: Server;
const sockets: Socket[] = [];

beforeAll(async () => {
  database = await openTestDatabase();
  // A database that takes connections and never says a word.
  mute = createServer((socket) => sockets.push(socket)).listen(0, '127.0.0.1');
  await once(mute, 'listening');
  const { port } = mute.address() as AddressInfo;
  setWebEnvironment({ databaseUrl: `postgresql://x@127.0.0.1:${port}/x` });
});
afterAll(async () => {
  for (const socket of sockets) socket.destroy();
  mute.close();
  await database.close();
});

const health = () => {
  const db = drizzle(database.pool, { casing: 'snake_case' });
  return readHealth({ ctx: { actor: { kind: 'system' }, db, now, requestId: 'test' } });
};
const beat = (name: string, at: Date, detail = '') =>
  database.pool.query(
    `insert into heartbeats values ($1, $2, $3) on conflict (name) do update set at = $2, detail = $3`,
    [name, at, detail],
  );

describe('health', () => {
  it('misses worker and queue while they said nothing, for too long, or that something is wrong', async () => {
    expect(await health()).toMatchObject({ worker: false, queue: false });
    await beat('worker', ago(10_000));
    await beat('queue', ago(10_000));
    expect(await health()).toMatchObject({ worker: true, queue: true });
    await beat('worker', ago(10_001));
    await beat('queue', ago(0), 'Redis does not answer');
    expect(await health()).toMatchObject({ worker: false, queue: false });
  });

  it('counts the agents that were heard lately among those that are not revoked', async () => {
    const insert = (name: string, heard: Date | null, revoked: Date | null) =>
      database.pool.query('insert into agents (name, last_report_at, revoked_at) values ($1, $2, $3)', [
        name,
        heard,
        revoked,
      ]);
    await insert('heard', ago(8_000), null);
    await insert('silent', ago(8_001), null);
    await insert('never', null, null);
    await insert('revoked', ago(0), ago(0));
    expect((await health()).agents).toEqual({ known: 3, heard: 1 });
  });

  it('is told within two seconds also when the database takes a connection and is silent', async () => {
    const began = performance.now();
    expect(await healthWithin()).toEqual({
      ok: false,
      database: false,
      queue: false,
      worker: false,
      agents: { known: 0, heard: 0 },
    });
    expect(performance.now() - began).toBeLessThan(2_000);
  });
});
