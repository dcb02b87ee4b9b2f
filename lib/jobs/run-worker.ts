import { randomBytes } from 'node:crypto';
import { beat } from '@/lib/services/health/beat';
import { followNews } from '@/lib/services/news/follow-news';
import { openServices } from '@/lib/services/open-services';
import { openConsumers } from './consumers';
import { openPost } from './post';
import { openQueues } from './queues';
import { failFastRedis, waitingRedis } from './redis';
import { Relay } from './relay';

const BEAT_EVERY_MS = 2_000;
/** Finds what no news told: rows written while the line was down, jobs and schedules that Redis forgot. */
const REBUILD_EVERY_MS = 3_000;
const CLOSE_MOST_MS = 5_000;

export interface WorkerSettings {
  databaseUrl: string;
  redisUrl: string;
  smtpUrl: string;
  mailFrom: string;
}

/** Repeats `work` with a rest between, never two at a time, until `closing` is aborted. */
function every(ms: number, closing: AbortSignal, work: () => Promise<void>): void {
  let busy = false;
  const timer = setInterval(() => {
    if (busy) return;
    busy = true;
    void work().finally(() => {
      busy = false;
    });
  }, ms);
  closing.addEventListener('abort', () => clearInterval(timer));
}

/**
 * The worker: relays the outbox into Redis, works off the queues, keeps the schedules, tells that it lives. Runs with
 * or without Redis; what it could not hand over stays in the outbox. Resolves once `closing` is aborted and all is shut.
 */
export async function runWorker(
  settings: WorkerSettings,
  closing: AbortSignal,
  log: (what: string, cause: unknown) => void,
): Promise<void> {
  const services = openServices(settings.databaseUrl, {
    now: () => new Date(),
    requestId: () => `worker-${randomBytes(6).toString('hex')}`,
    onError: (cause) => log('database', cause),
  });
  const { context } = services;
  const onRedis = (cause: Error) => log('redis', cause);
  const producing = failFastRedis(settings.redisUrl, onRedis);
  const consuming = waitingRedis(settings.redisUrl, onRedis);
  const queues = openQueues(producing, onRedis);
  const post = openPost(settings.smtpUrl, settings.mailFrom);
  const consumers = openConsumers({ connection: consuming, context, post, onFailed: log });
  const relay = new Relay({ context, queues, onFailed: (cause) => log('outbox', cause) });
  const attempt = (what: string, work: () => Promise<void>) => () =>
    work().catch((cause: unknown) => log(what, cause));
  const rebuild = attempt('schedules', async () => {
    await relay.look();
    await queues.ensureSchedules();
  });

  every(
    BEAT_EVERY_MS,
    closing,
    attempt('heartbeat', () => beat({ ctx: context(), name: 'worker' })),
  );
  every(REBUILD_EVERY_MS, closing, rebuild);
  producing.on('ready', () => void rebuild());
  await followNews({
    ctx: context(),
    databaseUrl: settings.databaseUrl,
    closing,
    follower: {
      onNews: ({ news }) => {
        if (news === 'outbox') void relay.look();
      },
      onConnected: () => void rebuild(),
      onLost: (cause) => log('news', cause),
    },
  });

  const shut = (async () => {
    await consumers.close();
    await queues.close();
  })().catch((cause: unknown) => log('closing', cause));
  // Closing waits for Redis; without Redis it must end all the same, and what was open stands in the outbox.
  await Promise.race([shut, new Promise((resolve) => setTimeout(resolve, CLOSE_MOST_MS).unref())]);
  producing.disconnect();
  consuming.disconnect();
  post.close();
  await services.close();
}
