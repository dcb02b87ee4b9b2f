import { ERRORS, EllwandError, type ErrorCode, type FieldProblem } from '@/lib/errors';

/** What a refused request answers, `application/problem+json` (RFC 9457) with our code beside it. */
export interface ProblemBody {
  type: 'about:blank';
  title: string;
  status: number;
  code: ErrorCode;
  fields: FieldProblem[];
  details: Record<string, unknown>;
  requestId: string;
}

/** Codes of the network and of PostgreSQL (classes 08, 57P and 53) that mean: the database is not there. */
const AWAY = /^(ECONNREFUSED|ECONNRESET|EPIPE|ETIMEDOUT|ENOENT|08\w{3}|57P\w{2}|53300)$/;

function codesOf(error: unknown): string[] {
  if (!(error instanceof Error)) return [];
  const own = 'code' in error && typeof error.code === 'string' ? [error.code] : [];
  return [...own, ...codesOf(error.cause)];
}

/** Our own errors keep their words; any other becomes a fixed sentence, and its cause goes to the log. */
export function problemOf(error: unknown, requestId: string): ProblemBody {
  const known = error instanceof EllwandError ? error : null;
  if (!known || known.code === 'unexpected') console.error(`[${requestId}]`, error);
  const away = codesOf(error).some((code) => AWAY.test(code));
  const code: ErrorCode = known ? known.code : away ? 'service-away' : 'unexpected';
  const { title, status } = ERRORS[code];
  return {
    type: 'about:blank',
    title,
    status,
    code,
    fields: known?.fields ?? [],
    details: known?.details ?? {},
    requestId,
  };
}

/** The problem as a response. */
export function problemResponse(error: unknown, requestId: string): Response {
  const body = problemOf(error, requestId);
  return Response.json(body, {
    status: body.status,
    headers: { 'content-type': 'application/problem+json', 'cache-control': 'no-store' },
  });
}
