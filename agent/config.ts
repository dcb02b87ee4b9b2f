import { readFile } from 'node:fs/promises';
import { dirname, resolve } from 'node:path';
import { z } from 'zod';
import { JsonProblem, parseLocatedJson, type LocatedJson } from './config/located-json';

const configSchema = z.strictObject({
  server: z
    .url({ protocol: /^https?$/, error: 'must be the address of the server, as "https://ellwand.example"' })
    .transform((address) => address.replace(/\/+$/, '')),
  dataDir: z.string({ error: 'must name the folder in which the agent keeps its journal' }).min(1),
  pairingCode: z.string().min(8, 'must be the code from the set-up page, at least 8 characters').optional(),
  /** How many times as fast the agent waits. Above 1 it serves virtual rigs alone. */
  clockSpeed: z
    .number({ error: 'must be a number from 1, and only for virtual rigs' })
    .min(1, 'must be at least 1')
    .max(1_000, 'must be at most 1000')
    .default(1),
  rigs: z
    .array(
      z.strictObject({
        rig: z.string({ error: 'must be the name or id of a rig as in the set-up' }).min(1),
        port: z.string({ error: 'must be a serial port, as "/dev/ttyUSB0"' }).min(1),
      }),
      { error: 'must be a list of { "rig": …, "port": … }' },
    )
    .min(1, 'must name at least one rig and its port')
    .max(64, 'must not name more than 64 rigs')
    .superRefine(refuseDoubles),
});

/** `dataDir` is absolute; `rigs[].rig` is a rig's name or id. */
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
  return { ...parsed.data, dataDir: resolve(dirname(path), parsed.data.dataDir) };
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
      const message = key === null ? issue.message : 'is not known here: remove it or correct its name';
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

function refuseDoubles(rigs: { rig: string; port: string }[], ctx: z.RefinementCtx): void {
  for (const key of ['rig', 'port'] as const) {
    const seen = new Set<string>();
    for (const [index, entry] of rigs.entries()) {
      const message = `is given twice: each rig has one port, each port one rig`;
      if (seen.has(entry[key])) ctx.addIssue({ code: 'custom', path: [index, key], message });
      seen.add(entry[key]);
    }
  }
}
