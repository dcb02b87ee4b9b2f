import { and, eq, inArray, isNotNull, isNull, lt, or, sql } from 'drizzle-orm';
import { rigReports, rigs } from '@/db/schema/rigs';
import { runs } from '@/db/schema/runs';
import { alarms } from '@/db/schema/traffic';
import { SILENT_AFTER_MS } from '@/lib/fleet/rig-state';
import { RUN_ACTIVE } from '@/lib/fleet/run';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { inTransaction } from '../transaction';
import { raiseAlarm } from './raise-alarm';

/** A run that waits in the tray moves nothing any more. */
const MAY_MOVE = RUN_ACTIVE.filter((state) => state !== 'ended');

/**
 * Raises `rig silent` for each rig that has work and was not heard for longer than its limit. Reports end it.
 * Called every other second by the worker. Returns how many were raised.
 */
export async function sweepSilence({ ctx }: { ctx: ServiceContext }): Promise<number> {
  authoriseSystem(ctx);
  const limit = new Date(ctx.now.getTime() - SILENT_AFTER_MS);
  return inTransaction(ctx, async (inner) => {
    const silent = await inner.db
      .select({ rigId: rigs.id, runId: runs.id, heardAt: rigReports.heardAt })
      .from(rigs)
      .innerJoin(runs, and(eq(runs.rigId, rigs.id), inArray(runs.state, MAY_MOVE)))
      .leftJoin(rigReports, eq(rigReports.rigId, rigs.id))
      .leftJoin(
        alarms,
        and(eq(alarms.rigId, rigs.id), sql`${alarms.kind} = 'rig silent'`, isNull(alarms.endedAt)),
      )
      .where(
        and(
          isNotNull(rigs.agentId),
          isNull(alarms.id),
          or(lt(rigReports.heardAt, limit), and(isNull(rigReports.heardAt), lt(runs.preparedAt, limit))),
        ),
      );
    for (const { rigId, runId, heardAt } of silent) {
      const details: Record<string, string> = heardAt ? { heardAt: heardAt.toISOString() } : {};
      await raiseAlarm(inner, { kind: 'rig silent', rigId, runId, details });
    }
    return silent.length;
  });
}
