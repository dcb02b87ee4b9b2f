import { EllwandError } from '@/lib/errors';
import { type CommandOutcome, holdRunSchema } from '@/lib/schemas/run';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { askRun } from './quiet-command';

/** A person saw a misfeed: the run is held with its cause. @throws EllwandError `illegal-step` unless it has begun. */
export async function holdRun({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<CommandOutcome> {
  const { runId, cause } = parseInput(holdRunSchema, input);
  return askRun(ctx, {
    right: 'runs.operate',
    runId,
    order: ({ rig, run }) => {
      if (run.state !== 'cutting' && run.state !== 'paused' && run.state !== 'held') {
        throw new EllwandError('illegal-step');
      }
      return { kind: 'hold', rigId: rig.id, runId, cause };
    },
  });
}
