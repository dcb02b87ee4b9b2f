import { z } from 'zod';
import type { ErrorCode } from '@/lib/errors';
import { eventUploadAnswerSchema } from '@/lib/protocol/events';
import type { CallResult } from './server-call';

/** What to do after one upload was answered, or was not. */
export type UploadStep =
  /** All up to `through` are stored. */
  | { step: 'stored'; through: number }
  /** The server wants to go on from another number. */
  | { step: 'go-from'; sequence: number }
  | { step: 'retry'; code: ErrorCode; slow: boolean; details?: Record<string, unknown> }
  /** Going on would hide a loss or mix two journals: a person has to look. */
  | { step: 'stop'; code: 'event-conflict' | 'journal-gap'; details: Record<string, unknown> };

const gapSchema = z.object({ expected: z.number().int().min(1) });

/** Mended by a person, not by trying again soon. */
const SLOW: ReadonlySet<ErrorCode> = new Set([
  'token-refused',
  'protocol-unknown',
  'not-allowed',
  'bad-input',
  'file-too-large',
  'rig-not-bound',
]);

/** @param first sequence of the first event sent @param last the newest durable event of this journal */
export function uploadStep(result: CallResult, first: number, last: number): UploadStep {
  if (!result.ok) return afterProblem(result.code, result.details, first, last);
  const answer = eventUploadAnswerSchema.safeParse(result.body);
  if (!answer.success) return { step: 'retry', code: 'unexpected', slow: false };
  const through = answer.data.storedThrough;
  if (through > last)
    return { step: 'stop', code: 'event-conflict', details: { storedThrough: through, last } };
  if (through === first - 1) return { step: 'retry', code: 'unexpected', slow: false };
  return through < first ? { step: 'go-from', sequence: through + 1 } : { step: 'stored', through };
}

function afterProblem(
  code: ErrorCode,
  details: Record<string, unknown>,
  first: number,
  last: number,
): UploadStep {
  if (code === 'event-conflict') return { step: 'stop', code, details };
  if (code !== 'journal-gap') return { step: 'retry', code, slow: isSlow(code), details };
  const gap = gapSchema.safeParse(details);
  if (!gap.success || gap.data.expected === first) return { step: 'retry', code, slow: false };
  const { expected } = gap.data;
  // The server has events that were never written here: this folder is a copy or an old one.
  if (expected > last + 1) return { step: 'stop', code: 'event-conflict', details: { expected, last } };
  return { step: 'go-from', sequence: expected };
}

/** Whether trying again soon is useless. */
export function isSlow(code: ErrorCode): boolean {
  return SLOW.has(code);
}
