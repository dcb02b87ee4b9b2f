import { eq } from 'drizzle-orm';
import { rigs } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { type CommandOutcome, dropRunSchema } from '@/lib/schemas/run';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { awaitOutcome } from '../traffic/await-outcome';
import { issueCommand } from '../traffic/issue-command';
import { inTransaction } from '../transaction';
import { lockRun } from './lock-run';

/**
 * Asks a rig to give back a lot of which nothing was cut; part of the caller's transaction. The lot is free when the
 * agent says so (law 4), and not before; a start that is on its way meanwhile meets a newer fence.
 * @throws EllwandError `illegal-step` when the run has begun.
 */
export async function askForDrop(ctx: ServiceContext, personId: string, runId: string): Promise<string> {
  const { rig, run } = await lockRun(ctx, runId);
  if (run.state !== 'prepared') throw new EllwandError('illegal-step');
  await ctx.db
    .update(rigs)
    .set({ fence: rig.fence + 1 })
    .where(eq(rigs.id, rig.id));
  return issueCommand(ctx, personId, { kind: 'drop-program', rigId: rig.id, runId });
}

/** A person takes a lot that has not begun off a rig. Where the rig is silent: `releaseLot`. */
export async function dropRun({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<CommandOutcome> {
  const { personId } = authorise(ctx, 'runs.operate');
  const { runId, reason } = parseInput(dropRunSchema, input);
  const commandId = await inTransaction(ctx, async (inner) => {
    await audit(inner, 'run.drop', `run:${runId}`, { reason });
    return askForDrop(inner, personId, runId);
  });
  return awaitOutcome(ctx, commandId);
}
