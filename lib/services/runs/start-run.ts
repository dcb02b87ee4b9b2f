import { type CommandOutcome, startRunSchema } from '@/lib/schemas/run';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { moveRun } from './move-run';

/**
 * A person who stands at the rig starts its prepared run.
 * @throws EllwandError with the first condition of law 5 that does not hold (`lib/fleet/start-conditions.ts`).
 */
export async function startRun({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<CommandOutcome> {
  const { runId, presenceCode } = parseInput(startRunSchema, input);
  return moveRun(ctx, { action: 'start', runId, presenceCode }, async (_inner, { run }, own) => ({
    kind: 'start-run',
    ...own,
    programSha256: run.programSha256,
  }));
}
