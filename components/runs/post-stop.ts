import { z } from 'zod';
import { ERRORS, type ErrorCode } from '@/lib/errors';
import type { ActionResult } from '@/lib/schemas/action-result';
import { commandOutcomeSchema, stopRunSchema, type CommandOutcome } from '@/lib/schemas/run';

const TIMEOUT_MS = 10_000;

const problemSchema = z.object({
  code: z.enum(Object.keys(ERRORS) as [ErrorCode, ...ErrorCode[]]),
  title: z.string(),
  fields: z.array(z.object({ path: z.string(), message: z.string() })).default([]),
  requestId: z.string().default(''),
});

/**
 * Sends a pause or a stop by a request of its own: server actions of a page run one after the other, and a stop waits
 * for nothing (law 8). Throws when nothing answers in 10 s.
 */
export function postStop(verb: 'pause' | 'stop') {
  return async (input: unknown): Promise<ActionResult<CommandOutcome | null>> => {
    const { runId } = stopRunSchema.parse(input);
    const response = await fetch(`/api/runs/${runId}/${verb}`, {
      method: 'POST',
      signal: AbortSignal.timeout(TIMEOUT_MS),
    });
    const body: unknown = await response.json();
    if (!response.ok) return { ok: false, ...problemSchema.parse(body) };
    return { ok: true, data: commandOutcomeSchema.nullable().parse(body) };
  };
}
