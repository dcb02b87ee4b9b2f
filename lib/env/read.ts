import type { z } from 'zod';

/**
 * Makes a reader of one process's settings: parsed at the first call, kept afterwards. Lazy, so that a build or a
 * module that merely imports it needs no setting.
 * Throws an Error that names every missing or malformed variable, never its value.
 */
export function lazyEnv<T>(schema: z.ZodType<T>): () => T {
  let known: { value: T } | undefined;
  return () => {
    known ??= { value: parseEnv(schema, process.env) };
    return known.value;
  };
}

/** Parses `source`; throws an Error that names the variables at fault. */
export function parseEnv<T>(schema: z.ZodType<T>, source: Record<string, string | undefined>): T {
  const result = schema.safeParse(source);
  if (result.success) return result.data;
  const faults = result.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`);
  throw new Error(`Settings missing or wrong. ${faults.join('; ')}`);
}
