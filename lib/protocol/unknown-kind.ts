import type { z } from 'zod';

/** A message whose kind, reading, outcome or the like is a word that this version has no meaning for. */
export interface UnknownKind {
  /** Where the word stands, as in `events.3.body.kind`. */
  path: string;
  /** The word itself, at most 40 characters of it. */
  heard: string;
}

const HEARD_CHARACTERS_MAX = 40;

function valueAt(input: unknown, path: readonly PropertyKey[]): unknown {
  return path.reduce<unknown>(
    (value, key) => (typeof value === 'object' && value !== null ? Reflect.get(value, key) : undefined),
    input,
  );
}

/**
 * Whether a message was refused because it is of a kind that this version does not know; null when it is only wrong.
 * A kind that is no word at all is wrong, not unknown.
 */
export function unknownKindOf(error: z.ZodError, input: unknown): UnknownKind | null {
  for (const issue of error.issues) {
    if (issue.code !== 'invalid_union' || issue.discriminator === undefined) continue;
    const heard = valueAt(input, issue.path);
    if (typeof heard !== 'string' || ('options' in issue && issue.options?.includes(heard))) continue;
    return { path: issue.path.join('.'), heard: heard.slice(0, HEARD_CHARACTERS_MAX) };
  }
  return null;
}
