import { UnrecoverableError, Worker } from 'bullmq';
import type { Redis } from 'ioredis';
import { ZodError } from 'zod';
import type { ServiceContext, SystemActor } from '@/lib/services/context';
import { restMs } from './backoff';
import { QUEUES } from './definitions';
import { loadHandler } from './handlers/load';
import type { Post } from './post';

interface ConsumerOptions {
  /** Must wait for Redis for ever (`maxRetriesPerRequest: null`): a consumer has nothing better to do. */
  connection: Redis;
  context: () => ServiceContext<SystemActor>;
  post: Post;
  onFailed: (what: string, cause: unknown) => void;
}

async function handle(name: string, payload: unknown, { context, post }: ConsumerOptions): Promise<void> {
  const handler = await loadHandler(name);
  if (!handler) throw new UnrecoverableError(`no job is called ${name}`);
  try {
    await handler({ ctx: context(), payload, post });
  } catch (cause) {
    // A payload that does not parse will not parse the next time either.
    if (cause instanceof ZodError) throw new UnrecoverableError(cause.message);
    throw cause;
  }
}

const STALLED_LOOK_MS = 5_000;
const LOCK_MS = 10_000;

/** One consumer a queue, one job at a time: dispatch must not race itself, and mail servers like it slow. */
export function openConsumers(options: ConsumerOptions): { close(): Promise<void> } {
  const consumers = QUEUES.map((name) => {
    const worker = new Worker(name, (job) => handle(job.name, job.data, options), {
      connection: options.connection,
      prefix: 'ellwand',
      concurrency: 1,
      // A worker that was killed leaves a job behind: another takes it after this, not after half a minute.
      stalledInterval: STALLED_LOOK_MS,
      lockDuration: LOCK_MS,
      settings: {
        backoffStrategy: (attempt, _type, _error, job) => restMs(attempt, job?.opts.backoff, Math.random()),
      },
    });
    worker.on('error', (cause) => options.onFailed(`queue ${name}`, cause));
    worker.on('failed', (job, cause) => options.onFailed(`job ${job?.name ?? name}`, cause));
    return worker;
  });
  return {
    async close() {
      await Promise.all(consumers.map((worker) => worker.close()));
    },
  };
}
