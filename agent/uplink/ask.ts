import { createHash } from 'node:crypto';
import type { z } from 'zod';
import { EllwandError } from '@/lib/errors';
import { boundRigsSchema, runProgramSchema, type BoundRigs, type RunProgram } from '@/lib/protocol/pairing';
import { PROTOCOL_VERSION } from '@/lib/protocol/version';
import { backOffMs } from './back-off';
import { callServer, type Server } from './server-call';
import { pauseUntil } from './waiting';

const RIGS_TIMEOUT_MS = 10_000;
const PROGRAM_TIMEOUT_MS = 30_000;
/** A server that is away is asked so often before the question is given up. */
const TRIES = 4;

/** @throws EllwandError `service-away` when the server does not answer, else with the server's code */
export function askForRigs(server: Server, random: () => number): Promise<BoundRigs> {
  return ask(server, random, '/api/agent/rigs', RIGS_TIMEOUT_MS, boundRigsSchema);
}

/** @throws EllwandError as above; `program-refused` when the text is not the one its sum was made of */
export async function askForProgram(
  server: Server,
  random: () => number,
  runId: string,
): Promise<RunProgram> {
  const path = `/api/agent/runs/${encodeURIComponent(runId)}/program`;
  const run = await ask(server, random, path, PROGRAM_TIMEOUT_MS, runProgramSchema);
  const sum = createHash('sha256').update(run.program, 'utf8').digest('hex');
  if (run.runId !== runId || sum !== run.programSha256) {
    throw new EllwandError('program-refused', { details: { runId } });
  }
  return run;
}

async function ask<T>(
  server: Server,
  random: () => number,
  path: string,
  timeoutMs: number,
  schema: z.ZodType<T>,
): Promise<T> {
  for (let tries = 1; ; tries += 1) {
    const result = await callServer(server, { method: 'GET', path, timeoutMs });
    if (result.ok) {
      const parsed = schema.safeParse(result.body);
      if (parsed.success) return parsed.data;
      const details = { spoken: PROTOCOL_VERSION, path };
      throw new EllwandError('protocol-unknown', { details, cause: parsed.error });
    }
    if (result.code !== 'service-away' || tries === TRIES || server.closing.aborted) {
      throw new EllwandError(result.code, { details: result.details, cause: result.cause });
    }
    await pauseUntil(server.clock, backOffMs(tries, random()), server.closing);
  }
}
