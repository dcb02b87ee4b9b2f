import { eq } from 'drizzle-orm';
import { batchLines, lots } from '@/db/schema/batches';
import { misfeeds, runs } from '@/db/schema/runs';
import { type FoldedRun, foldRunEvent } from '@/lib/fleet/fold';
import type { AgentEvent, EventBody } from '@/lib/protocol/events';
import { endAlarms } from '../alarms/end-alarms';
import { raiseAlarm } from '../alarms/raise-alarm';
import type { ServiceContext } from '../context';
import { knownPerson } from '../people/known-person';
import { freeLot } from '../runs/free-lot';
import { runColumns, type RunRow } from '../runs/run-columns';
import { stepLot } from '../runs/step-lot';
import { tell } from '../tell';
import { applyWorkHold } from './apply-work-hold';

type RunEvent = Extract<EventBody, { runId: string }>;

const iso = (moment: Date | null) => moment?.toISOString() ?? null;
const dated = (text: string | null) => (text === null ? null : new Date(text));

function foldable(run: RunRow): FoldedRun {
  return {
    state: run.state,
    stateSince: run.stateSince.toISOString(),
    holdReason: run.holdReason,
    holdNote: run.holdNote,
    doubtPiece: run.doubtPiece,
    programHeldAt: iso(run.programHeldAt),
    startedAt: iso(run.startedAt),
    startedBy: run.startedBy,
    endedAt: iso(run.endedAt),
    outcome: run.outcome,
  };
}

async function keep(ctx: ServiceContext, runId: string, run: FoldedRun): Promise<void> {
  await ctx.db
    .update(runs)
    .set({
      ...run,
      stateSince: new Date(run.stateSince),
      programHeldAt: dated(run.programHeldAt),
      startedAt: dated(run.startedAt),
      startedBy: knownPerson(run.startedBy),
      endedAt: dated(run.endedAt),
    })
    .where(eq(runs.id, runId));
}

async function moveLot(ctx: ServiceContext, run: RunRow, target: 'running' | 'cut' | 'waiting') {
  if (target === 'waiting') return freeLot(ctx, run.lotId, 'taken off the rig');
  const [lot] = await ctx.db
    .select({ id: lots.id, state: lots.state, batchId: batchLines.batchId })
    .from(lots)
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .where(eq(lots.id, run.lotId))
    .for('update', { of: lots });
  if (!lot) return;
  await stepLot(ctx, lot, target);
  await tell(ctx, { news: 'batch', batchId: lot.batchId });
}

async function noteMisfeed(ctx: ServiceContext, event: Extract<RunEvent, { kind: 'misfeed' }>, at: string) {
  await ctx.db.insert(misfeeds).values({
    runId: event.runId,
    rigId: event.rigId,
    piece: event.piece,
    cause: event.cause,
    foundBy: event.foundBy,
    personId: knownPerson(event.personId),
    at: new Date(at),
  });
}

/** One event of a run that is on that rig: the run's step, its lot's, its alarms. */
async function applyRunEvent(ctx: ServiceContext, event: RunEvent, at: string): Promise<void> {
  const [run] = await ctx.db.select(runColumns).from(runs).where(eq(runs.id, event.runId)).for('update');
  if (!run || run.rigId !== event.rigId) return;
  const before = foldable(run);
  const folded = foldRunEvent(before, event, at);
  if (folded.run !== before) await keep(ctx, run.id, folded.run);
  if (folded.lot) await moveLot(ctx, run, folded.lot);
  if (event.kind === 'misfeed') await noteMisfeed(ctx, event, at);
  await endAlarms(ctx, { rigIds: [run.rigId], kinds: folded.end });
  for (const alarm of folded.raise) {
    await raiseAlarm(ctx, { ...alarm, rigId: run.rigId, runId: run.id, raisedAt: ctx.now });
  }
}

/** Applies the rare events of a stored batch, in their order; cuts and trims were counted by the statement already. */
export async function applyEvents(ctx: ServiceContext, events: readonly AgentEvent[]): Promise<void> {
  for (const { at, body } of events) {
    switch (body.kind) {
      case 'piece-cut':
      case 'trim-cut':
      case 'agent-started':
      case 'rig-connected':
      case 'rig-lost':
      case 'guard-opened':
      case 'guard-closed':
      case 'firmware-said':
        break;
      case 'work-hold-began':
      case 'work-hold-ended':
        await applyWorkHold(ctx, body, at);
        break;
      default:
        await applyRunEvent(ctx, body, at);
    }
  }
}
