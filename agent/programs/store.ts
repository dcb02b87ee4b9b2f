import { createHash } from 'node:crypto';
import { mkdir, readdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';
import { fileErrorCode, removeDurably, writeDurably } from '@/agent/journal/durable-file';
import { EllwandError } from '@/lib/errors';
import { runProgramSchema, type RunProgram } from '@/lib/protocol/pairing';

const SUFFIX = '.json';

export interface ProgramStore {
  /** Resolves once the program would outlast a power loss. @throws EllwandError `program-refused` on a wrong sum */
  saveProgram(run: RunProgram): Promise<void>;
  /** @returns null when it is not held. @throws EllwandError `program-not-held` when it is held but damaged */
  loadProgram(runId: string): Promise<RunProgram | null>;
  /** One that is not held is no error. */
  dropProgram(runId: string): Promise<void>;
  heldRunIds(): Promise<string[]>;
}

/** Whether the program's text is the one that the sum was made of. */
export function programIsWhole(run: Pick<RunProgram, 'program' | 'programSha256'>): boolean {
  return createHash('sha256').update(run.program, 'utf8').digest('hex') === run.programSha256;
}

/** The programs of runs on disk, one file each, so that a run can be finished without the server (law 7). */
export async function openProgramStore(dataDir: string): Promise<ProgramStore> {
  const folder = join(dataDir, 'programs');
  await mkdir(folder, { recursive: true });
  const pathOf = (runId: string) => join(folder, `${z.uuid().parse(runId)}${SUFFIX}`);

  return {
    async saveProgram(run) {
      if (!programIsWhole(run)) throw new EllwandError('program-refused', { details: { runId: run.runId } });
      await writeDurably(pathOf(run.runId), JSON.stringify(runProgramSchema.parse(run)));
    },
    loadProgram: async (runId) => load(pathOf(runId), runId),
    dropProgram: async (runId) => removeDurably(pathOf(runId)),
    async heldRunIds() {
      const names = await readdir(folder);
      return names.filter((name) => name.endsWith(SUFFIX)).map((name) => name.slice(0, -SUFFIX.length));
    },
  };
}

async function load(path: string, runId: string): Promise<RunProgram | null> {
  let text: string;
  try {
    text = await readFile(path, 'utf8');
  } catch (cause) {
    if (fileErrorCode(cause) === 'ENOENT') return null;
    throw cause;
  }
  const run = parseProgram(text, runId);
  if (run.runId !== runId || !programIsWhole(run)) throw damaged(runId);
  return run;
}

function parseProgram(text: string, runId: string): RunProgram {
  try {
    return runProgramSchema.parse(JSON.parse(text));
  } catch (cause) {
    throw damaged(runId, cause);
  }
}

function damaged(runId: string, cause?: unknown): EllwandError {
  return new EllwandError('program-not-held', { details: { runId, damaged: true }, cause });
}
