import { and, eq, isNull } from 'drizzle-orm';
import { z } from 'zod';
import { alarms } from '@/db/schema/traffic';
import { EllwandError } from '@/lib/errors';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { tell } from '../tell';
import { inTransaction } from '../transaction';

export const acknowledgeAlarmSchema = z.object({ alarmId: z.uuid() });

/**
 * Puts a name to a standing alarm: somebody is on it. The first name stays; the alarm ends by its cause alone.
 * @throws EllwandError `not-found` for an alarm that is not standing.
 */
export async function acknowledgeAlarm({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<void> {
  const { personId } = authorise(ctx, 'alarms.acknowledge');
  const { alarmId } = parseInput(acknowledgeAlarmSchema, input);
  await inTransaction(ctx, async (inner) => {
    const [standing] = await inner.db
      .select({ rigId: alarms.rigId, kind: alarms.kind, acknowledgedBy: alarms.acknowledgedBy })
      .from(alarms)
      .where(and(eq(alarms.id, alarmId), isNull(alarms.endedAt)))
      .for('update');
    if (!standing) throw new EllwandError('not-found');
    if (standing.acknowledgedBy) return;
    await inner.db
      .update(alarms)
      .set({ acknowledgedBy: personId, acknowledgedAt: inner.now })
      .where(eq(alarms.id, alarmId));
    await audit(inner, 'alarm.acknowledged', `rig:${standing.rigId}`, { kind: standing.kind });
    await tell(inner, { news: 'rig', rigId: standing.rigId });
  });
}
