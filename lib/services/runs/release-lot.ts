import { eq } from 'drizzle-orm';
import { rigReports, rigs } from '@/db/schema/rigs';
import { runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import { HOLD_ALARMS } from '@/lib/fleet/fold';
import { SILENT_AFTER_MS } from '@/lib/fleet/rig-state';
import { RUN_TRANSITIONS } from '@/lib/fleet/run';
import { mayStep } from '@/lib/fleet/transitions';
import { releaseLotSchema } from '@/lib/schemas/run';
import { endAlarms } from '../alarms/end-alarms';
import { raiseAlarm } from '../alarms/raise-alarm';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { causes, tell } from '../tell';
import { issueCommand } from '../traffic/issue-command';
import { inTransaction } from '../transaction';
import { freeLot } from './free-lot';
import { lockRun } from './lock-run';
import { lockLot, splitLot } from './split-lot';
import { stepLot } from './step-lot';

/** @throws EllwandError `illegal-step` for a rig that is heard: stop it, or have it give the lot back. */
async function requireSilence(ctx: ServiceContext, rigId: string): Promise<void> {
  const [seen] = await ctx.db.select().from(rigReports).where(eq(rigReports.rigId, rigId));
  if (seen?.report.port !== 'open') return;
  if (ctx.now.getTime() - seen.heardAt.getTime() <= SILENT_AFTER_MS) throw new EllwandError('illegal-step');
}

/** What was confirmed stays with the run, to be bagged; the rest becomes a lot of its own, or all of it is free. */
async function takeLot(ctx: ServiceContext, lotId: string, cut: number): Promise<string | null> {
  const locked = await lockLot(ctx, lotId);
  if (!locked) return null;
  if (cut === 0) {
    await freeLot(ctx, lotId, 'taken from a silent rig');
  } else {
    await stepLot(ctx, locked.lot, 'cut');
    await splitLot(ctx, locked, cut);
  }
  return locked.batch.id;
}

/**
 * Law 4: a named person takes a lot from a silent rig. The count stands as it was confirmed; pieces that the rig
 * reports later are surplus. The rig may still be moving: a stop waits for it, in that person's name, and its tray
 * must be cleared before it gets another lot.
 * @throws EllwandError `illegal-step` when the rig is heard or the run is over.
 */
export async function releaseLot({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  const { personId } = authorise(ctx, 'runs.release');
  const { runId, reason } = parseInput(releaseLotSchema, input);
  await inTransaction(ctx, async (inner) => {
    const { rig, run } = await lockRun(inner, runId);
    if (!mayStep(RUN_TRANSITIONS, run.state, 'released')) throw new EllwandError('illegal-step');
    await requireSilence(inner, rig.id);
    await inner.db
      .update(runs)
      .set({ state: 'released', stateSince: inner.now, holdReason: null, holdNote: '', doubtPiece: null })
      .where(eq(runs.id, runId));
    await inner.db
      .update(rigs)
      .set({ fence: rig.fence + 1 })
      .where(eq(rigs.id, rig.id));
    const batchId = await takeLot(inner, run.lotId, run.cut);
    await endAlarms(inner, { rigIds: [rig.id], kinds: HOLD_ALARMS });
    await raiseAlarm(inner, {
      kind: 'tray to clear',
      rigId: rig.id,
      runId,
      details: { outcome: 'released' },
    });
    if (rig.agentId) await issueCommand(inner, personId, { kind: 'stop', rigId: rig.id, runId });
    await audit(inner, 'run.release', `run:${runId}`, { reason, cut: run.cut });
    await tell(inner, { news: 'rig', rigId: rig.id });
    if (batchId) await tell(inner, { news: 'batch', batchId });
    await causes(inner, { topic: 'dispatch', payload: { because: 'lot taken from a silent rig' } });
  });
}
