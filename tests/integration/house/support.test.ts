import { Redis } from 'ioredis';
import { afterAll, describe, expect, it } from 'vitest';
import { openTestDatabase } from '@/tests/support/database';
import { testRedis } from '@/tests/support/redis';

const closers: (() => Promise<void>)[] = [];
afterAll(async () => {
  for (const close of closers) await close();
});

describe('the databases of tests', () => {
  it('start with the newest schema', async () => {
    const database = await openTestDatabase();
    closers.push(database.close);
    const { rows } = await database.pool.query<{ tables: number }>(
      "select count(*)::int as tables from information_schema.tables where table_schema = 'public'",
    );
    expect(rows[0]?.tables).toBeGreaterThan(10);
  });

  it('hides from one file what another writes', async () => {
    const [one, two] = await Promise.all([openTestDatabase(), openTestDatabase()]);
    closers.push(one.close, two.close);
    await one.pool.query('create table only_in_one (id int)');
    const seen = await two.pool.query("select to_regclass('only_in_one') as found");
    expect(seen.rows).toEqual([{ found: null }]);
  });

  it('is gone once closed, even while somebody is connected', async () => {
    const gone = await openTestDatabase();
    const watcher = await openTestDatabase();
    closers.push(watcher.close);
    const name = new URL(gone.url).pathname.slice(1);
    await gone.close();
    const left = await watcher.pool.query('select 1 from pg_database where datname = $1', [name]);
    expect(left.rowCount).toBe(0);
  });
});

describe('the Redis of tests', () => {
  it('keeps what it held over a stop, and nothing when emptied', async () => {
    const redis = await testRedis();
    closers.push(redis.close);
    const client = new Redis(redis.url, { maxRetriesPerRequest: null, retryStrategy: () => 50 });
    client.on('error', () => undefined);
    closers.push(async () => client.disconnect());
    await client.set('held', 'yes');
    await redis.stop();
    await redis.start();
    expect(await client.get('held')).toBe('yes');
    await redis.empty();
    expect(await client.get('held')).toBeNull();
  });
});
