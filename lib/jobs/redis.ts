import { Redis } from 'ioredis';

const RETRY_MOST_MS = 2_000;

const retryStrategy = (attempt: number) => Math.min(attempt * 100, RETRY_MOST_MS);

/** A connection for consumers: waits for Redis as long as it takes. */
export function waitingRedis(url: string, onError: (error: Error) => void): Redis {
  const redis = new Redis(url, { maxRetriesPerRequest: null, retryStrategy });
  redis.on('error', onError);
  return redis;
}

/** A connection for producers: while Redis is away each call fails at once. */
export function failFastRedis(url: string, onError: (error: Error) => void): Redis {
  const redis = new Redis(url, {
    maxRetriesPerRequest: 0,
    enableOfflineQueue: false,
    commandTimeout: 2_000,
    retryStrategy,
  });
  redis.on('error', onError);
  return redis;
}
