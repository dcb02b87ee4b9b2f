import { z } from 'zod';

/** The answer of `GET /api/health`; `ok` is false, and the status 503, when database, queue or worker is missing. */
export const healthSchema = z.object({
  ok: z.boolean(),
  database: z.boolean(),
  queue: z.boolean(),
  worker: z.boolean(),
  agents: z.object({ known: z.number().int(), heard: z.number().int() }),
});

export type Health = z.infer<typeof healthSchema>;
