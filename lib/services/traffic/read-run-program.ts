import { and, eq } from 'drizzle-orm';
import { z } from 'zod';
import { profiles, rigs } from '@/db/schema/rigs';
import { runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import type { RunProgram } from '@/lib/protocol/pairing';
import { authoriseAgent } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';

const readRunProgramSchema = z.object({ runId: z.uuid() });

/**
 * All that an agent needs to cut a run without the server.
 * @throws EllwandError `not-found` for a run that is not on one of this agent's rigs.
 */
export async function readRunProgram({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<RunProgram> {
  const { agentId } = authoriseAgent(ctx);
  const { runId } = parseInput(readRunProgramSchema, input);
  const [found] = await ctx.db
    .select({ run: runs, profile: profiles })
    .from(runs)
    .innerJoin(rigs, and(eq(rigs.id, runs.rigId), eq(rigs.agentId, agentId)))
    .innerJoin(profiles, eq(profiles.id, runs.profileId))
    .where(eq(runs.id, runId));
  if (!found) throw new EllwandError('not-found');
  const { run, profile } = found;
  return {
    runId: run.id,
    rigId: run.rigId,
    fence: run.fence,
    tag: run.tag,
    pieces: run.pieces,
    lengthMm: run.lengthMm,
    firstPieces: run.firstPieces,
    wireId: run.wireId,
    profileVersion: profile.version,
    profile: profile.profile,
    programSha256: run.programSha256,
    program: run.program,
  };
}
