import type { z } from 'zod';
import { EllwandError } from '@/lib/errors';
import { plainWords } from '@/lib/schemas/plain-words';

/** Parses an input by its schema. @throws EllwandError `bad-input` with one problem a field. */
export function parseInput<Schema extends z.ZodType>(schema: Schema, input: unknown): z.output<Schema> {
  const parsed = schema.safeParse(input, { error: plainWords });
  if (parsed.success) return parsed.data;
  throw new EllwandError('bad-input', {
    fields: parsed.error.issues.map((issue) => ({ path: issue.path.join('.'), message: issue.message })),
  });
}
