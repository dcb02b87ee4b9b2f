import { sql } from 'drizzle-orm';
import { alarms } from '@/db/schema/traffic';
import { ALARM_PRIORITIES, type AlarmKind } from '@/lib/fleet/alarms';
import type { ServiceContext } from '../context';
import { tell } from '../tell';

export interface NewAlarm {
  kind: AlarmKind;
  rigId: string;
  runId: string | null;
  details?: Record<string, string | number>;
  /** When it came to be, by the server's clock; default now. */
  raisedAt?: Date;
}

/**
 * Raises an alarm; part of the caller's transaction. At most one stands a rig and kind: a second one only brings the
 * standing one's details up to date, and whoever acknowledged it has to look again when they changed.
 */
export async function raiseAlarm(ctx: ServiceContext, alarm: NewAlarm): Promise<void> {
  const details = alarm.details ?? {};
  const changed = sql`${alarms.details} is distinct from excluded.details`;
  await ctx.db
    .insert(alarms)
    .values({
      kind: alarm.kind,
      priority: ALARM_PRIORITIES[alarm.kind],
      rigId: alarm.rigId,
      runId: alarm.runId,
      raisedAt: alarm.raisedAt ?? ctx.now,
      details,
    })
    .onConflictDoUpdate({
      target: [alarms.rigId, alarms.kind],
      targetWhere: sql`ended_at is null`,
      set: {
        details: sql`excluded.details`,
        runId: sql`excluded.run_id`,
        acknowledgedBy: sql`case when ${changed} then null else ${alarms.acknowledgedBy} end`,
        acknowledgedAt: sql`case when ${changed} then null else ${alarms.acknowledgedAt} end`,
      },
    });
  await tell(ctx, { news: 'rig', rigId: alarm.rigId });
}
