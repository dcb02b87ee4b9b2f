import { and, eq, isNull } from 'drizzle-orm';
import { z } from 'zod';
import { alarms } from '@/db/schema/traffic';
import { EllwandError } from '@/lib/errors';
import type { AlarmKind } from '@/lib/fleet/alarms';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { tell } from '../tell';
import { inTransaction } from '../transaction';

export const acknowledgeAlarmSchema = z.object({ alarmId: z.uuid() });

/** Alarms whose cause lies in the past: nothing but a person's word can end them. */
const ENDED_BY_WORD: readonly AlarmKind[] = ['surplus pieces', 'journal conflict', 'program refused'];

/**
 * Puts a name to a standing alarm: somebody is on it. The first name stays. An alarm ends with its cause; one whose
 * cause lies in the past ends by this.
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
      .set({
        acknowledgedBy: personId,
        acknowledgedAt: inner.now,
        endedAt: ENDED_BY_WORD.includes(standing.kind) ? inner.now : null,
      })
      .where(eq(alarms.id, alarmId));
    await audit(inner, 'alarm.acknowledged', `rig:${standing.rigId}`, { kind: standing.kind });
    await tell(inner, { news: 'rig', rigId: standing.rigId });
  });
}
