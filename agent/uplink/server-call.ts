import { z } from 'zod';
import type { Clock } from '@/agent/clock';
import { SOFTWARE } from '@/agent/software';
import { ERRORS, type ErrorCode } from '@/lib/errors';
import { PROTOCOL_HEADER, PROTOCOL_VERSION, SOFTWARE_HEADER } from '@/lib/protocol/version';
import { Deadline } from './waiting';

export interface Server {
  /** Without a slash at the end. */
  address: string;
  /** null only while pairing. */
  token: string | null;
  clock: Clock;
  fetch: typeof fetch;
  /** Aborted when the agent stops: every call ends then. */
  closing: AbortSignal;
}

export interface Request {
  method: 'GET' | 'POST';
  path: string;
  body?: unknown;
  timeoutMs: number;
}

export type CallResult =
  | { ok: true; body: unknown; sentAt: Date; roundTripMs: number }
  /** `service-away`: no answer, in time or at all. */
  | { ok: false; code: ErrorCode; details: Record<string, unknown>; cause?: unknown };

/** More than the longest program with its wrapping. */
const BODY_MAX_BYTES = 8_000_000;

const problemSchema = z.object({
  code: z.string(),
  details: z.record(z.string(), z.unknown()).optional(),
});

export function headersFor(token: string | null): Record<string, string> {
  return {
    ...(token === null ? {} : { authorization: `Bearer ${token}` }),
    [PROTOCOL_HEADER]: String(PROTOCOL_VERSION),
    [SOFTWARE_HEADER]: SOFTWARE,
    'content-type': 'application/json',
  };
}

/** One request and its whole answer as JSON. Never throws; whatever goes wrong is told by a code. */
export async function callServer(server: Server, request: Request): Promise<CallResult> {
  const deadline = new Deadline(server.clock, request.timeoutMs, server.closing);
  const sentAt = server.clock.date();
  const sentMs = server.clock.nowMs();
  try {
    const response = await server.fetch(`${server.address}${request.path}`, {
      method: request.method,
      headers: headersFor(server.token),
      body: request.body === undefined ? undefined : JSON.stringify(request.body),
      signal: deadline.signal,
    });
    const body = parseJson(await readBounded(response));
    if (!response.ok) return problemOf(response.status, body);
    return { ok: true, body, sentAt, roundTripMs: server.clock.nowMs() - sentMs };
  } catch (cause) {
    return { ok: false, code: 'service-away', details: {}, cause };
  } finally {
    deadline.end();
  }
}

/** What an answer that is not 2xx says, read from its problem body, else from its status. */
export function problemOf(status: number, body: unknown): Extract<CallResult, { ok: false }> {
  const problem = problemSchema.safeParse(body);
  const code = problem.success && isErrorCode(problem.data.code) ? problem.data.code : codeOfStatus(status);
  return { ok: false, code, details: problem.data?.details ?? { status } };
}

function isErrorCode(code: string): code is ErrorCode {
  return Object.hasOwn(ERRORS, code);
}

function codeOfStatus(status: number): ErrorCode {
  if (status === 401) return 'token-refused';
  if (status === 426) return 'protocol-unknown';
  return status >= 500 || status === 429 ? 'service-away' : 'unexpected';
}

async function readBounded(response: Response): Promise<string> {
  const decoder = new TextDecoder();
  let text = '';
  let bytes = 0;
  if (!response.body) return text;
  for await (const chunk of response.body) {
    bytes += chunk.length;
    if (bytes > BODY_MAX_BYTES) throw new RangeError(`an answer of more than ${BODY_MAX_BYTES} bytes`);
    text += decoder.decode(chunk, { stream: true });
  }
  return text + decoder.decode();
}

/** @returns undefined for what is no JSON, which no schema takes */
function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}
