import { Queue, type JobsOptions } from 'bullmq';
import type { Redis } from 'ioredis';
import { JOBS, QUEUES, SCHEDULES, type JobName, type QueueName } from './definitions';

type Queues = Record<QueueName, Queue>;

function optionsOf(name: JobName): JobsOptions {
  const { attempts, backoffMs } = JOBS[name];
  return {
    attempts,
    backoff: { type: 'custom', delay: backoffMs },
    // Nothing is kept: the outbox row says what is open, and a job of the same id must be addable again.
    removeOnComplete: true,
    removeOnFail: true,
  };
}

/** The queues as the worker fills them. Every call fails at once while Redis is away: the outbox row stays open. */
export interface JobQueues {
  add(name: 'dispatch' | 'mail', outboxId: number): Promise<void>;
  /** Makes every schedule that Redis does not hold; changes nothing where it does. */
  ensureSchedules(): Promise<void>;
  close(): Promise<void>;
}

/** Opens the queues on one connection, which must fail fast. `onError` hears what Redis says. */
export function openQueues(connection: Redis, onError: (error: Error) => void): JobQueues {
  const queues = Object.fromEntries(
    QUEUES.map((name) => {
      const queue = new Queue(name, { connection, prefix: 'ellwand' });
      queue.on('error', onError);
      return [name, queue];
    }),
  ) as Queues;
  return {
    async add(name, outboxId) {
      await queues[JOBS[name].queue].add(
        name,
        { outboxId },
        { ...optionsOf(name), jobId: `outbox-${outboxId}` },
      );
    },
    async ensureSchedules() {
      for (const { job, everyMs } of SCHEDULES) {
        const queue = queues[JOBS[job].queue];
        if (await queue.getJobScheduler(job)) continue;
        await queue.upsertJobScheduler(
          job,
          { every: everyMs },
          { name: job, data: {}, opts: optionsOf(job) },
        );
      }
    },
    async close() {
      await Promise.all(QUEUES.map((name) => queues[name].close()));
    },
  };
}
