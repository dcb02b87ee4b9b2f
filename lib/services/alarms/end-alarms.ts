import { and, inArray, isNull } from 'drizzle-orm';
import { alarms } from '@/db/schema/traffic';
import type { AlarmKind } from '@/lib/fleet/alarms';
import type { ServiceContext } from '../context';
import { tell } from '../tell';

/** Ends the standing alarms of these kinds on these rigs; part of the caller's transaction. */
export async function endAlarms(
  ctx: ServiceContext,
  { rigIds, kinds }: { rigIds: string[]; kinds: readonly AlarmKind[] },
): Promise<void> {
  if (rigIds.length === 0 || kinds.length === 0) return;
  const ended = await ctx.db
    .update(alarms)
    .set({ endedAt: ctx.now })
    .where(and(inArray(alarms.rigId, rigIds), inArray(alarms.kind, [...kinds]), isNull(alarms.endedAt)))
    .returning({ rigId: alarms.rigId });
  for (const rigId of new Set(ended.map((alarm) => alarm.rigId))) await tell(ctx, { news: 'rig', rigId });
}
