import { pieceEntries } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import { type PieceSums, sumsHold } from '@/lib/fleet/counts';
import type { RunState } from '@/lib/fleet/run';
import { scrapPiecesSchema } from '@/lib/schemas/run';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { tell } from '../tell';
import { inTransaction } from '../transaction';
import { lockRun } from './lock-run';
import { pieceSums } from './piece-sums';

const SUM_OF = { scrap: 'scrapped', sample: 'sampled', doubt: 'doubted' } as const satisfies Record<
  string,
  keyof PieceSums
>;

/** While the pieces are at the rig; what the bag's label says stands. */
const OPEN: readonly RunState[] = ['cutting', 'paused', 'held', 'ended', 'released'];

/**
 * Enters pieces that do not go into the bag; a negative number corrects an earlier entry.
 * @throws EllwandError `bad-input` when a sum would fall below zero or more be taken than was cut, `illegal-step`
 * before the first cut and after the bag.
 */
export async function scrapPieces({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  const { personId } = authorise(ctx, 'runs.operate');
  const { runId, kind, pieces, reason } = parseInput(scrapPiecesSchema, input);
  await inTransaction(ctx, async (inner) => {
    const { rig, run } = await lockRun(inner, runId);
    if (!OPEN.includes(run.state)) throw new EllwandError('illegal-step');
    const sums = await pieceSums(inner, runId);
    const next = { ...sums, [SUM_OF[kind]]: sums[SUM_OF[kind]] + pieces };
    if (!sumsHold(run.cut, next)) {
      throw new EllwandError('bad-input', {
        fields: [{ path: 'pieces', message: 'That is more than there are.' }],
      });
    }
    await inner.db.insert(pieceEntries).values({ runId, kind, pieces, reason, personId, at: inner.now });
    await tell(inner, { news: 'rig', rigId: rig.id });
  });
}
