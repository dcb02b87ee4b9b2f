import { type CommandOutcome, goOnSchema } from '@/lib/schemas/run';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { firstPiecesFailed } from './first-pieces-failed';
import { moveRun } from './move-run';

/**
 * A person who stands at the rig lets a paused or held run go on. When a first piece was out of tolerance, the rig
 * holds again after as many new ones: it was set right, and that is to be seen before the rest is cut.
 * @throws EllwandError with the first condition of law 5 that does not hold (`lib/fleet/start-conditions.ts`).
 */
export async function goOn({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<CommandOutcome> {
  const { runId, presenceCode } = parseInput(goOnSchema, input);
  return moveRun(ctx, { action: 'go-on', runId, presenceCode }, async (inner, { run }, own) => ({
    kind: 'go-on',
    ...own,
    firstPiecesAgain: await firstPiecesFailed(inner, run),
  }));
}
