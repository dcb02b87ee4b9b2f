import { and, eq, inArray, sql } from 'drizzle-orm';
import { batches, batchLines, lots } from '@/db/schema/batches';
import { rigs } from '@/db/schema/rigs';
import { runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import { oneBatchSchema, type Withdrawal } from '@/lib/schemas/batches';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { PersonActor, ServiceContext } from '../context';
import { parseInput } from '../parse';
import { askForDrop } from '../runs/drop-run';
import { tell } from '../tell';
import { inTransaction } from '../transaction';
import { lockBatch } from './lock-batch';

/** The runs of a batch that are on a rig, with what they cut. */
function runsOnRigs(ctx: ServiceContext, batchId: string) {
  return ctx.db
    .select({ id: runs.id, state: runs.state, pieces: runs.pieces, cut: runs.cut, rigName: rigs.name })
    .from(runs)
    .innerJoin(lots, eq(lots.id, runs.lotId))
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(rigs, eq(rigs.id, runs.rigId))
    .where(
      and(eq(batchLines.batchId, batchId), inArray(runs.state, ['prepared', 'cutting', 'paused', 'held'])),
    )
    .orderBy(rigs.benchOrder);
}

/** Asks the rig to give back a lot that has not begun. A start that came first lets it finish, as any running one. */
async function takeBack(ctx: ServiceContext<PersonActor>, runId: string): Promise<void> {
  try {
    await askForDrop(ctx, ctx.actor.personId, runId);
  } catch (error) {
    if (!(error instanceof EllwandError && error.code === 'illegal-step')) throw error;
  }
}

async function cutSoFar(ctx: ServiceContext, batchId: string): Promise<number> {
  const [row] = await ctx.db
    .select({ cut: sql<number>`coalesce(sum(${runs.cut}), 0)::int` })
    .from(runs)
    .innerJoin(lots, eq(lots.id, runs.lotId))
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .where(eq(batchLines.batchId, batchId));
  return row?.cut ?? 0;
}

async function withdrawWaiting(ctx: ServiceContext, batchId: string): Promise<number> {
  const lines = ctx.db.select({ id: batchLines.id }).from(batchLines).where(eq(batchLines.batchId, batchId));
  const gone = await ctx.db
    .update(lots)
    .set({ state: 'withdrawn', waitingReason: '' })
    .where(and(inArray(lots.lineId, lines), eq(lots.state, 'waiting')))
    .returning({ pieces: lots.pieces });
  return gone.reduce((sum, lot) => sum + lot.pieces, 0);
}

/**
 * Takes back what is not begun: waiting lots at once, lots that stand ready on a rig as soon as its agent gives them
 * up (law 4). Running ones finish and are counted. Answers what is cut and what still cuts.
 * @throws EllwandError `illegal-step` when it is withdrawn already.
 */
export async function withdrawBatch({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<Withdrawal> {
  const actor = authorise(ctx, 'batches.write');
  const { batchId } = parseInput(oneBatchSchema, input);
  return inTransaction({ ...ctx, actor }, async (inner) => {
    const batch = await lockBatch(inner, batchId);
    if (batch.withdrawnAt) throw new EllwandError('illegal-step');
    await inner.db
      .update(batches)
      .set({ withdrawnAt: inner.now, withdrawnBy: actor.personId, revision: batch.revision + 1 })
      .where(eq(batches.id, batchId));
    const onRigs = await runsOnRigs(inner, batchId);
    const given = onRigs.filter(({ state }) => state === 'prepared');
    for (const { id } of given) await takeBack(inner, id);
    const withdrawnPieces = await withdrawWaiting(inner, batchId);
    const cutPieces = await cutSoFar(inner, batchId);
    await audit(inner, 'batch.withdraw', `batch:${batchId}`, { withdrawnPieces, cutPieces });
    await tell(inner, { news: 'batch', batchId });
    return {
      withdrawnPieces: withdrawnPieces + given.reduce((sum, run) => sum + run.pieces, 0),
      cutPieces,
      stillCutting: onRigs
        .filter(({ state }) => state !== 'prepared')
        .map(({ rigName, pieces, cut }) => ({ rigName, pieces, cut })),
    };
  });
}
