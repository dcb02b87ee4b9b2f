import { and, asc, eq, isNull, type SQL } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { rigs } from '@/db/schema/rigs';
import { alarms } from '@/db/schema/traffic';
import type { AlarmDto } from '@/lib/schemas/floor';
import type { ServiceContext } from '../context';

/** Standing alarms, the most urgent first, then the oldest. */
export async function selectStandingAlarms(ctx: ServiceContext, where: SQL | undefined): Promise<AlarmDto[]> {
  const rows = await ctx.db
    .select({ alarm: alarms, rigName: rigs.name, byName: people.name })
    .from(alarms)
    .innerJoin(rigs, eq(rigs.id, alarms.rigId))
    .leftJoin(people, eq(people.id, alarms.acknowledgedBy))
    .where(and(isNull(alarms.endedAt), where))
    .orderBy(asc(alarms.priority), asc(alarms.raisedAt));
  return rows.map(({ alarm, rigName, byName }) => ({
    id: alarm.id,
    kind: alarm.kind,
    priority: alarm.priority,
    rigId: alarm.rigId,
    rigName,
    runId: alarm.runId,
    raisedAt: alarm.raisedAt.toISOString(),
    acknowledgedByName: byName,
    acknowledgedAt: alarm.acknowledgedAt?.toISOString() ?? null,
    details: alarm.details,
  }));
}
