import { setTimeout as pause } from 'node:timers/promises';
import { Redis } from 'ioredis';
import type { House } from '@/scripts/house/house.mjs';
import type { HouseFault } from './fault';

/** Strikes a house with faults of one wave; their times count from `begin`, which every schedule of the wave calls. */
export function strikeHouse(
  house: House,
  faults: readonly { afterMs: number; fault: HouseFault }[],
  say: (text: string) => void,
): { begin: () => void; over: Promise<void> } {
  let begin: () => void = () => undefined;
  const begun = new Promise<void>((resolve) => {
    begin = resolve;
  });
  const over = begun.then(async () => {
    let passedMs = 0;
    for (const { afterMs, fault } of faults) {
      await pause(afterMs - passedMs);
      passedMs = afterMs;
      say(`house: ${fault.kind}`);
      await strike(house, fault);
    }
  });
  return { begin: () => begin(), over };
}

async function strike(house: House, { kind }: HouseFault): Promise<void> {
  switch (kind) {
    case 'server-killed':
      return house.child('web').crash();
    case 'worker-killed':
      return house.child('worker').crash();
    case 'redis-restarted':
      return house.child('Redis').crash();
    case 'database-restarted':
      return house.child('PostgreSQL').crash();
    case 'redis-emptied':
      return emptyRedis(house.env.REDIS_URL ?? '');
  }
}

async function emptyRedis(url: string): Promise<void> {
  const redis = new Redis(url, { maxRetriesPerRequest: 1 });
  redis.on('error', () => undefined);
  try {
    await redis.flushall();
  } finally {
    redis.disconnect();
  }
}
