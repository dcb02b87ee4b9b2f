import type { ProgramStore } from '@/agent/programs/store';
import type { FetchedProgram } from '@/agent/runner/reduce';
import { EllwandError } from '@/lib/errors';
import { checkProgram } from '@/lib/program/check';
import { readProgram } from '@/lib/program/read';
import type { ReadProgram } from '@/lib/program/steps';
import type { RunProgram } from '@/lib/protocol/pairing';

const PROBLEM_CHARACTERS_MAX = 200;

/** Law 9 at the rig: the program taken apart, or every reason why it is not sent. */
export function judgeProgram(
  run: RunProgram,
  rigId: string,
): { program: ReadProgram } | { problems: string[] } {
  if (run.rigId !== rigId) return { problems: ['The program is another rig’s.'] };
  const { tag, pieces, lengthMm } = run;
  const problems = checkProgram(run.program, run.profile, { tag, pieces, lengthMm });
  if (problems.length > 0) {
    return {
      problems: problems.map(({ lineNumber, message }) =>
        `Line ${lineNumber}: ${message}`.slice(0, PROBLEM_CHARACTERS_MAX),
      ),
    };
  }
  const reading = readProgram(run.program, run.profile);
  return reading.ok ? { program: reading.program } : { problems: ['The program cannot be read.'] };
}

/** Fetches a run's program, judges it and keeps it on disk, so that the run needs no server any more (law 7). */
export async function fetchProgram(
  uplink: { fetchProgram(runId: string): Promise<RunProgram> },
  programs: Pick<ProgramStore, 'saveProgram'>,
  rigId: string,
  runId: string,
): Promise<FetchedProgram> {
  try {
    const run = await uplink.fetchProgram(runId);
    const judged = judgeProgram(run, rigId);
    if ('problems' in judged) return { outcome: 'refused', problems: judged.problems };
    await programs.saveProgram(run);
    return { outcome: 'read', run, program: judged.program };
  } catch (error) {
    if (!(error instanceof EllwandError)) throw error;
    if (error.code === 'program-refused') {
      return { outcome: 'refused', problems: ['The program is not the one that its sum was made of.'] };
    }
    return { outcome: 'unreachable' };
  }
}
