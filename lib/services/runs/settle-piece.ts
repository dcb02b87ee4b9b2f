import { EllwandError } from '@/lib/errors';
import { type CommandOutcome, settlePieceSchema } from '@/lib/schemas/run';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { askRun } from './quiet-command';

/**
 * Law 3: a person counts or discards the piece in doubt. The rig keeps the answer with their name and reports it; the
 * count rises by its event, not by this call.
 * @throws EllwandError `illegal-step` when no piece is in doubt.
 */
export async function settlePiece({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<CommandOutcome> {
  const { runId, answer } = parseInput(settlePieceSchema, input);
  return askRun(ctx, {
    right: 'runs.operate',
    runId,
    order: ({ rig, run }) => {
      if (run.doubtPiece === null) throw new EllwandError('illegal-step');
      return { kind: 'settle-piece', rigId: rig.id, runId, answer };
    },
  });
}
