import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { listBatches } from '@/lib/services/batches/list-batches';
import { lineOf, makeBatch } from '@/tests/support/batch-world';
import { eventually } from '@/tests/support/eventually';
import { type FloorWorld, openFloorWorld } from '@/tests/support/floor-world';
import { countGiven, keepHeard } from '@/tests/support/heard-rigs';
import { testRedis, type TestRedis } from '@/tests/support/redis';
import { startTestWorker } from '@/tests/support/test-worker';

const RIGS = 6;
/** The worker beats every 2 s: so many beats are a minute. */
const BEATS_OF_A_MINUTE = 30;

let floor: FloorWorld;
let redis: TestRedis;
let closers: (() => unknown)[] = [];

beforeEach(async () => {
  floor = await openFloorWorld({ rigs: RIGS });
  redis = await testRedis();
  const worker = startTestWorker({ databaseUrl: floor.world.url, redisUrl: redis.url });
  closers = [() => redis.close(), floor.close, worker.stop, await keepHeard(floor)];
});
afterEach(async () => {
  for (const close of closers.toReversed()) await close();
});

async function lastBeat(name: 'worker' | 'queue'): Promise<number> {
  const [row] = await floor.world.query<{ at: Date }>('select at from heartbeats where name = $1', [name]);
  return row?.at.getTime() ?? 0;
}

/** Resolves at the next sign of life of the worker, or of its queue. */
async function nextBeat(name: 'worker' | 'queue', timeoutMs = 20_000): Promise<void> {
  const before = await lastBeat(name);
  await eventually(floor.world.url, `${name} beats`, async () => (await lastBeat(name)) > before, timeoutMs);
}

async function untilGiven(lots: number): Promise<void> {
  await eventually(
    floor.world.url,
    `${lots} lots are given and no wish is open`,
    async () => {
      const counts = await countGiven(floor);
      return counts.given === lots && counts.wishes === 0;
    },
    40_000,
  );
}

describe('Redis', () => {
  it('emptied in the middle of it all loses nothing, doubles nothing, and gets its schedules back (law 6)', async () => {
    await nextBeat('queue');
    for (let index = 0; index < RIGS; index += 1) {
      const [made] = await Promise.all([makeBatch(floor, [lineOf(floor)]), redis.empty()]);
      expect(made).toBeTruthy();
    }
    await redis.empty();
    await untilGiven(RIGS);
    expect(await countGiven(floor)).toEqual({ given: RIGS, runs: RIGS, commands: RIGS, wishes: 0 });
    await nextBeat('queue');
    await nextBeat('queue');
  });

  it('gone for a minute holds up the queue only: services answer, the worker lives, then all is given once (law 6)', async () => {
    await nextBeat('queue');
    await redis.stop();
    for (let beat = 0; beat < BEATS_OF_A_MINUTE; beat += 1) {
      if (beat < RIGS) await makeBatch(floor, [lineOf(floor)]);
      const list = await listBatches({ ctx: await floor.as('operator'), input: {} });
      expect(list.total).toBe(Math.min(beat + 1, RIGS));
      await nextBeat('worker');
    }
    expect((await countGiven(floor)).wishes).toBeGreaterThanOrEqual(RIGS);
    expect(Date.now() - (await lastBeat('queue'))).toBeGreaterThan(50_000);
    await redis.start();
    await untilGiven(RIGS);
    expect(await countGiven(floor)).toEqual({ given: RIGS, runs: RIGS, commands: RIGS, wishes: 0 });
    await nextBeat('queue');
  }, 180_000);
});
