import { EllwandError } from '@/lib/errors';
import { type CommandOutcome, pauseRunSchema } from '@/lib/schemas/run';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { askRun } from './quiet-command';

/** The rig finishes its piece and waits at standby. @throws EllwandError `illegal-step` unless the run is cutting. */
export async function pauseRun({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<CommandOutcome> {
  const { runId } = parseInput(pauseRunSchema, input);
  return askRun(ctx, {
    right: 'runs.operate',
    runId,
    order: ({ rig, run }) => {
      if (run.state !== 'cutting') throw new EllwandError('illegal-step');
      return { kind: 'pause', rigId: rig.id, runId };
    },
  });
}
