import { eq, sql } from 'drizzle-orm';
import { batchLines, lots } from '@/db/schema/batches';
import { measurements, pieceEntries, runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import { firstPiecesGroup, piecesToMeasure, withinTolerance } from '@/lib/fleet/first-pieces';
import { measurePiecesSchema } from '@/lib/schemas/run';
import { endAlarms } from '../alarms/end-alarms';
import { authorise } from '../authorise';
import type { PersonActor, ServiceContext } from '../context';
import { parseInput } from '../parse';
import { tell } from '../tell';
import { inTransaction } from '../transaction';
import { newestMeasurements } from './first-pieces-failed';
import { lockRun } from './lock-run';
import type { RunRow } from './run-columns';

interface Measured {
  piece: number;
  lengthMm: number;
}

/** @throws EllwandError `bad-input` unless exactly the pieces asked for came, or, when none are, some of the group. */
function requireRightPieces(run: RunRow, lengths: readonly Measured[]): void {
  const facts = { ...run, heldForThem: run.state === 'held' && run.holdReason === 'first-pieces' };
  if (!facts.heldForThem) throw new EllwandError('illegal-step');
  const asked = piecesToMeasure(facts);
  const allowed = new Set(asked.length > 0 ? asked : firstPiecesGroup(facts));
  const sent = new Set(lengths.map(({ piece }) => piece));
  const complete = asked.every((piece) => sent.has(piece));
  const proper = sent.size === lengths.length && [...sent].every((piece) => allowed.has(piece));
  if (complete && proper) return;
  throw new EllwandError('bad-input', {
    fields: [{ path: 'lengths', message: `Enter one length for each of pieces ${[...allowed].join(', ')}.` }],
  });
}

async function toleranceOf(ctx: ServiceContext, run: RunRow) {
  const [line] = await ctx.db
    .select({
      toleranceMinusMm: batchLines.toleranceMinusMm,
      tolerancePlusMm: batchLines.tolerancePlusMm,
    })
    .from(lots)
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .where(eq(lots.id, run.lotId));
  if (!line) throw new EllwandError('not-found');
  return { ...line, lengthMm: run.lengthMm };
}

/** A piece that turned out bad is scrapped; one that was mistyped before and is good after all is taken back. */
async function scrapBad(
  ctx: ServiceContext<PersonActor>,
  run: RunRow,
  judged: readonly { piece: number; good: boolean }[],
): Promise<void> {
  const pieces = judged.map(({ piece }) => piece);
  const before = await newestMeasurements(ctx, run.id, Math.min(...pieces), Math.max(...pieces));
  for (const { piece, good } of judged) {
    const wasBad = before.get(piece) === false;
    if (wasBad === !good) continue;
    const reason = good
      ? `first piece ${piece} measured again: within tolerance`
      : `first piece ${piece} out of tolerance`;
    await ctx.db.insert(pieceEntries).values({
      runId: run.id,
      kind: 'scrap',
      pieces: good ? -1 : 1,
      reason,
      personId: ctx.actor.personId,
      at: ctx.now,
    });
  }
}

/**
 * A person enters the lengths of the first pieces a run is held for. Every bad one is scrapped. With all of them
 * entered the run may go on; when one was bad, it then holds again after as many new ones. Until it goes on, a
 * mistyped length may be entered again; both entries are kept.
 * @throws EllwandError `illegal-step` when the run is not held for first pieces, `bad-input` for other pieces.
 */
export async function measurePieces({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  const actor = authorise(ctx, 'runs.operate');
  const { runId, lengths } = parseInput(measurePiecesSchema, input);
  await inTransaction({ ...ctx, actor }, async (inner) => {
    const { rig, run } = await lockRun(inner, runId);
    requireRightPieces(run, lengths);
    const line = await toleranceOf(inner, run);
    const judged = lengths.map((one) => ({ ...one, good: withinTolerance(one.lengthMm, line) }));
    await scrapBad(inner, run, judged);
    await inner.db.insert(measurements).values(
      judged.map(({ piece, lengthMm, good }) => ({
        runId,
        piece,
        lengthMm,
        withinTolerance: good,
        personId: actor.personId,
        at: inner.now,
      })),
    );
    const through = Math.max(...lengths.map(({ piece }) => piece));
    await inner.db
      .update(runs)
      .set({ measuredThrough: sql`greatest(${runs.measuredThrough}, ${through})` })
      .where(eq(runs.id, runId));
    await endAlarms(inner, { rigIds: [rig.id], kinds: ['first pieces to measure'] });
    await tell(inner, { news: 'rig', rigId: rig.id });
  });
}
