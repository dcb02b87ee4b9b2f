import type { ErrorCode, FieldProblem } from '@/lib/errors';

/** What a server action answers: the data, or a code with its words, the fields at fault and the request's number. */
export type ActionResult<Data> =
  | { ok: true; data: Data }
  | { ok: false; code: ErrorCode; title: string; fields: FieldProblem[]; requestId: string };
