import type { z } from 'zod';
import { ERRORS, EllwandError, type ErrorCode } from '@/lib/errors';

const TIMEOUT_MS = 10_000;

function codeOf(problem: unknown): ErrorCode {
  const code = typeof problem === 'object' && problem !== null && 'code' in problem ? problem.code : null;
  return typeof code === 'string' && code in ERRORS ? (code as ErrorCode) : 'unexpected';
}

/**
 * Reads JSON from our own API and checks its shape.
 * @throws EllwandError with the server's code, or `service-away` when nothing answers in 10 s.
 */
export async function fetchJson<Schema extends z.ZodType>(
  path: string,
  schema: Schema,
  signal?: AbortSignal,
): Promise<z.output<Schema>> {
  const limit = AbortSignal.timeout(TIMEOUT_MS);
  let response: Response;
  try {
    response = await fetch(path, {
      headers: { accept: 'application/json' },
      signal: signal ? AbortSignal.any([signal, limit]) : limit,
    });
  } catch (cause) {
    throw new EllwandError('service-away', { cause });
  }
  const body: unknown = await response.json().catch((cause: unknown) => {
    throw new EllwandError('unexpected', { cause });
  });
  if (!response.ok) throw new EllwandError(codeOf(body));
  return schema.parse(body);
}
