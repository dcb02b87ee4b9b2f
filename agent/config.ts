import { readFile } from 'node:fs/promises';
import { dirname, resolve } from 'node:path';
import type { z } from 'zod';
import { JsonProblem, parseLocatedJson, type LocatedJson } from './config/located-json';
import { configSchema, UNKNOWN_NAME } from './config/schema';

/** `dataDir` and `caFile` are absolute; `rigs[].rig` is a rig's name or id. */
export type AgentConfig = z.infer<typeof configSchema>;

/** One line of the configuration that must be changed. */
export interface ConfigProblem {
  /** From 1; null when the file as a whole is meant. */
  line: number | null;
  path: string;
  message: string;
}

/** The configuration cannot be used; its message is fit to be printed and says what to change. */
export class ConfigError extends Error {
  constructor(
    readonly file: string,
    readonly problems: readonly ConfigProblem[],
    options: { cause?: unknown } = {},
  ) {
    super(problems.map((problem) => describe(file, problem)).join('\n'), options);
    this.name = 'ConfigError';
  }
}

/** Reads and checks the agent's configuration. @throws ConfigError that names file, line and what to write */
export async function loadConfig(path: string): Promise<AgentConfig> {
  const located = parseText(path, await readText(path));
  const parsed = configSchema.safeParse(located.value);
  if (!parsed.success) throw new ConfigError(path, problemsOf(parsed.error, located));
  const { dataDir, caFile } = parsed.data;
  const besideFile = (name: string) => resolve(dirname(path), name);
  return {
    ...parsed.data,
    dataDir: besideFile(dataDir),
    ...(caFile === undefined ? {} : { caFile: besideFile(caFile) }),
  };
}

async function readText(path: string): Promise<string> {
  try {
    return await readFile(path, 'utf8');
  } catch (cause) {
    const message = 'cannot be read: give the right path with --config';
    throw new ConfigError(path, [{ line: null, path: '', message }], { cause });
  }
}

function parseText(path: string, text: string): LocatedJson {
  try {
    return parseLocatedJson(text.replace(/^\uFEFF/, ''));
  } catch (cause) {
    if (!(cause instanceof JsonProblem)) throw cause;
    const found = cause.found === null ? 'the file ends' : `not ${cause.found}`;
    const message = `${cause.wanted} is wanted here, ${found}`;
    throw new ConfigError(path, [{ line: cause.line, path: '', message }], { cause });
  }
}

function problemsOf(error: z.ZodError, located: LocatedJson): ConfigProblem[] {
  return error.issues.flatMap((issue) => {
    const keys = issue.code === 'unrecognized_keys' ? issue.keys : [null];
    return keys.map((key) => {
      const path = [...issue.path, ...(key === null ? [] : [key])].map(String);
      const message = key === null ? issue.message : UNKNOWN_NAME;
      return { line: lineOf(path, located), path: path.join('.'), message };
    });
  });
}

/** The line of the value, or of the nearest thing around it when it is missing. */
function lineOf(path: readonly string[], located: LocatedJson): number | null {
  for (let length = path.length; length >= 0; length -= 1) {
    const line = located.lines.get(path.slice(0, length).join('.'));
    if (line !== undefined) return line;
  }
  return null;
}

function describe(file: string, { line, path, message }: ConfigProblem): string {
  const place = line === null ? file : `${file}, line ${line}`;
  return path === '' ? `${place}: ${message}` : `${place}: "${path}" ${message}`;
}
