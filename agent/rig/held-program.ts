import type { ProgramStore } from '@/agent/programs/store';
import type { Remembered } from '@/agent/runner/memory';
import type { RigBirth } from '@/agent/runner/restore';
import { EllwandError } from '@/lib/errors';
import type { RunProgram } from '@/lib/protocol/pairing';
import { judgeProgram } from './program';

/** The program of the run that the journal remembers: from disk, else from the server. Null: nobody has it. */
export async function loadHeldProgram(
  memory: Remembered | null,
  rigId: string,
  programs: Pick<ProgramStore, 'loadProgram' | 'saveProgram'>,
  uplink: { fetchProgram(runId: string): Promise<RunProgram> },
): Promise<RigBirth['held']> {
  if (!memory?.run) return null;
  const { runId } = memory.run;
  const given =
    (await orNull(() => programs.loadProgram(runId))) ?? (await orNull(() => uplink.fetchProgram(runId)));
  if (!given) return null;
  const judged = judgeProgram(given, rigId);
  return 'program' in judged ? { given, program: judged.program } : null;
}

async function orNull<Value>(load: () => Promise<Value | null>): Promise<Value | null> {
  try {
    return await load();
  } catch (error) {
    if (error instanceof EllwandError) return null;
    throw error;
  }
}
