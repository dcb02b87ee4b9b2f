import { eq } from 'drizzle-orm';
import { bags, pieceEntries, runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import { bagCode } from '@/lib/fleet/bag-code';
import { baggedOf, sumsHold } from '@/lib/fleet/counts';
import { clearTraySchema } from '@/lib/schemas/run';
import { endAlarms } from '../alarms/end-alarms';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { PersonActor, ServiceContext } from '../context';
import { parseInput } from '../parse';
import { causes, tell } from '../tell';
import { issueCommand } from '../traffic/issue-command';
import { inTransaction } from '../transaction';
import { freeLot } from './free-lot';
import { lockRun } from './lock-run';
import { pieceSums } from './piece-sums';
import type { RunRow } from './run-columns';
import { lockLot, splitLot } from './split-lot';
import { stepLot } from './step-lot';

/** Enters what was found at the tray, then counts what is left. @throws EllwandError `bad-input` for more than was cut. */
async function countBag(
  ctx: ServiceContext<PersonActor>,
  run: RunRow,
  found: { scrapped: number; sampled: number },
): Promise<number> {
  const entries = [
    { kind: 'scrap' as const, pieces: found.scrapped },
    { kind: 'sample' as const, pieces: found.sampled },
  ].filter((entry) => entry.pieces > 0);
  if (entries.length > 0) {
    const own = { runId: run.id, reason: 'found at the tray', personId: ctx.actor.personId, at: ctx.now };
    await ctx.db.insert(pieceEntries).values(entries.map((entry) => ({ ...entry, ...own })));
  }
  const sums = await pieceSums(ctx, run.id);
  if (sumsHold(run.cut, sums)) return baggedOf(run.cut, sums);
  throw new EllwandError('bad-input', {
    fields: [{ path: 'scrapped', message: `That is more than the ${run.cut} pieces cut.` }],
  });
}

/** The lot is bagged with what it gave, and the shortage waits as a lot of its own; a lot that gave nothing waits. */
async function bagLot(ctx: ServiceContext<PersonActor>, run: RunRow, pieces: number): Promise<string | null> {
  const locked = await lockLot(ctx, run.lotId);
  // A lot that was freed when the run was released is somebody else's by now.
  if (!locked || locked.lot.state !== 'cut' || locked.lot.rigId !== run.rigId) return null;
  const { lot, line, batch } = locked;
  if (pieces === 0) {
    await freeLot(ctx, lot.id, 'its run gave no piece');
    return null;
  }
  const code = bagCode({
    batchNumber: batch.number,
    linePosition: line.position,
    lotNumber: lot.number,
    runId: run.id,
  });
  const clearedBy = ctx.actor.personId;
  await ctx.db.insert(bags).values({ runId: run.id, code, pieces, clearedBy, clearedAt: ctx.now });
  await splitLot(ctx, locked, pieces);
  await stepLot(ctx, lot, 'bagged');
  await tell(ctx, { news: 'batch', batchId: batch.id });
  return code;
}

/**
 * A person emptied the tray: `scrapped` and `sampled` are what they found there beyond what was entered before. The
 * bag gets its count and its code (`readBag`; no piece, no bag); the rig is free for the next lot.
 * @throws EllwandError `illegal-step` unless the run is over, `bad-input` for more than was cut.
 */
export async function clearTray({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  const actor = authorise(ctx, 'runs.operate');
  const { runId, scrapped, sampled } = parseInput(clearTraySchema, input);
  await inTransaction({ ...ctx, actor }, async (inner) => {
    const { rig, run } = await lockRun(inner, runId);
    if (run.state !== 'ended' && run.state !== 'released') throw new EllwandError('illegal-step');
    const pieces = await countBag(inner, run, { scrapped, sampled });
    const code = await bagLot(inner, run, pieces);
    await inner.db.update(runs).set({ state: 'cleared', stateSince: inner.now }).where(eq(runs.id, runId));
    await endAlarms(inner, { rigIds: [rig.id], kinds: ['tray to clear', 'surplus pieces'] });
    if (rig.agentId) await issueCommand(inner, actor.personId, { kind: 'clear-tray', rigId: rig.id, runId });
    await audit(inner, 'tray.clear', `run:${runId}`, { pieces, code });
    await tell(inner, { news: 'rig', rigId: rig.id });
    await causes(inner, { topic: 'dispatch', payload: { because: 'tray cleared' } });
  });
}
