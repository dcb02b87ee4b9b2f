import { z } from 'zod';

/** Mail has a queue of its own, so that a dead mail server holds up nothing else. */
export const QUEUES = ['work', 'mail'] as const;
export type QueueName = (typeof QUEUES)[number];

const outboxRow = z.object({ outboxId: z.number().int().positive() });
const nothing = z.object({});

/**
 * Every job: which queue carries it, what its payload holds (ids, never data), how often it is tried. A job that was tried
 * so often is forgotten and made anew from its outbox row, so nothing is lost by giving up.
 */
export const JOBS = {
  dispatch: { queue: 'work', payload: outboxRow, attempts: 5, backoffMs: 500 },
  mail: { queue: 'mail', payload: outboxRow, attempts: 12, backoffMs: 2_000 },
  'sweep-dispatch': { queue: 'work', payload: nothing, attempts: 1, backoffMs: 0 },
  'sweep-silence': { queue: 'work', payload: nothing, attempts: 1, backoffMs: 0 },
  'expire-commands': { queue: 'work', payload: nothing, attempts: 1, backoffMs: 0 },
  'sweep-sign-ins': { queue: 'work', payload: nothing, attempts: 1, backoffMs: 0 },
  'beat-queue': { queue: 'work', payload: nothing, attempts: 1, backoffMs: 0 },
} as const satisfies Record<
  string,
  { queue: QueueName; payload: z.ZodType; attempts: number; backoffMs: number }
>;

export type JobName = keyof typeof JOBS;

/** Jobs that come round by themselves. Redis keeps the schedule; the worker makes it anew when Redis forgot it. */
export const SCHEDULES = [
  { job: 'beat-queue', everyMs: 2_000 },
  { job: 'sweep-silence', everyMs: 2_000 },
  { job: 'expire-commands', everyMs: 2_000 },
  { job: 'sweep-dispatch', everyMs: 5_000 },
  { job: 'sweep-sign-ins', everyMs: 600_000 },
] as const satisfies readonly { job: JobName; everyMs: number }[];
