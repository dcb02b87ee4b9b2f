import { z } from 'zod';

/** What committed changes cause, by topic; the worker relays each to the job of the same name. */
export const outboxSchema = z.discriminatedUnion('topic', [
  z.object({ topic: z.literal('dispatch'), payload: z.object({ because: z.string() }) }),
  z.object({
    topic: z.literal('mail'),
    payload: z.object({ personId: z.uuid(), template: z.enum(['person-added']) }),
  }),
]);

export type OutboxEntry = z.infer<typeof outboxSchema>;
