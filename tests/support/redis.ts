import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Redis } from 'ioredis';
import { freePorts } from '@/scripts/house/ports.mjs';
import { startRedis } from '@/scripts/house/redis.mjs';

export interface TestRedis {
  url: string;
  /** Forgets everything, as after a lost disk. */
  empty(): Promise<void>;
  /** Takes Redis away; its data stays on disk. */
  stop(): Promise<void>;
  /** Brings it back on the same port with what it held. */
  start(): Promise<void>;
  /** Stops it for good and removes its folder. */
  close(): Promise<void>;
}

const PASSWORD = 'only-for-tests';

/** A Redis of its own with an append-only file, so that a test may empty or stop it. Close it in `afterAll`. */
export async function testRedis(): Promise<TestRedis> {
  const dataDir = mkdtempSync(join(tmpdir(), 'ellwand-redis-'));
  const [port] = await freePorts(1);
  if (port === undefined) throw new Error('No port was given');
  const start = () => startRedis({ dataDir, port, password: PASSWORD, tied: true, say: console.error });
  const url = `redis://:${PASSWORD}@127.0.0.1:${port}/0`;
  let running: Awaited<ReturnType<typeof start>> | undefined = await start();
  const stop = async () => {
    await running?.stop();
    running = undefined;
  };
  return {
    url,
    stop,
    empty: () => emptyRedis(url),
    start: async () => {
      running ??= await start();
    },
    close: async () => {
      await stop();
      rmSync(dataDir, { recursive: true, force: true });
    },
  };
}

async function emptyRedis(url: string): Promise<void> {
  const client = new Redis(url, { maxRetriesPerRequest: 1 });
  client.on('error', () => undefined);
  try {
    await client.flushall();
  } finally {
    client.disconnect();
  }
}
