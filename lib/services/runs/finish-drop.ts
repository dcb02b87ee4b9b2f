import { and, eq } from 'drizzle-orm';
import { runs } from '@/db/schema/runs';
import { endAlarms } from '../alarms/end-alarms';
import type { ServiceContext } from '../context';
import { tell } from '../tell';
import { freeLot } from './free-lot';

/** The agent said that it holds a prepared run's program no more: run dropped, lot free. Nothing when it is not so. */
export async function finishDrop(ctx: ServiceContext, runId: string): Promise<void> {
  const [dropped] = await ctx.db
    .update(runs)
    .set({ state: 'dropped', stateSince: ctx.now })
    .where(and(eq(runs.id, runId), eq(runs.state, 'prepared')))
    .returning({ lotId: runs.lotId, rigId: runs.rigId });
  if (!dropped) return;
  await endAlarms(ctx, { rigIds: [dropped.rigId], kinds: ['program refused'] });
  await freeLot(ctx, dropped.lotId, 'taken off the rig');
  await tell(ctx, { news: 'rig', rigId: dropped.rigId });
}
