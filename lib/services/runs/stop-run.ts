import { type CommandOutcome, stopRunSchema } from '@/lib/schemas/run';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { askRun } from './quiet-command';

/**
 * Law 8: taken in every state, also for a rig that is silent; it waits for the rig then. `waiting` in the answer means
 * that the rig has not said that it stopped.
 */
export async function stopRun({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<CommandOutcome> {
  const { runId } = parseInput(stopRunSchema, input);
  return askRun(ctx, {
    right: 'runs.stop',
    runId,
    order: ({ rig }) => ({ kind: 'stop', rigId: rig.id, runId }),
  });
}
