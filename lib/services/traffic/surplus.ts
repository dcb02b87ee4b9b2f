import { eq, sql } from 'drizzle-orm';
import { runs } from '@/db/schema/runs';
import { raiseAlarm } from '../alarms/raise-alarm';
import type { ServiceContext } from '../context';
import type { SurplusReport } from './store-events';

/**
 * Law 4: pieces that a rig reports for work that was taken from it, or beyond its order, are kept as surplus and raise
 * an alarm. Surplus is how far the highest such piece lies above the count, so a replay does not add to it.
 */
export async function keepSurplus(ctx: ServiceContext, reports: readonly SurplusReport[]): Promise<void> {
  for (const { rigId, runId, piece } of reports) {
    const [run] = await ctx.db
      .update(runs)
      .set({ surplus: sql`greatest(${runs.surplus}, ${piece} - ${runs.cut})` })
      .where(eq(runs.id, runId))
      .returning({ rigId: runs.rigId, surplus: runs.surplus });
    await raiseAlarm(ctx, {
      kind: 'surplus pieces',
      rigId,
      runId: run ? runId : null,
      details: run ? { pieces: run.surplus } : { piece, unknownRun: runId },
    });
  }
}
