import { and, eq, isNull } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { workHolds } from '@/db/schema/rigs';
import type { EventBody } from '@/lib/protocol/events';
import type { ServiceContext } from '../context';

type HoldEvent = Extract<EventBody, { kind: 'work-hold-began' | 'work-hold-ended' }>;

/**
 * The agent's word on a work hold. `began` says that the rig stands still now; a hold that was begun at the rig itself
 * is written down by it. `ended` ends the hold of that same person only.
 */
export async function applyWorkHold(ctx: ServiceContext, event: HoldEvent, at: string): Promise<void> {
  const open = and(eq(workHolds.rigId, event.rigId), isNull(workHolds.endedAt));
  const moment = new Date(at);
  if (event.kind === 'work-hold-ended') {
    await ctx.db
      .update(workHolds)
      .set({ endedAt: moment, endedBy: event.personId })
      .where(and(open, eq(workHolds.personId, event.personId)));
    return;
  }
  const standing = await ctx.db.update(workHolds).set({ standstillAt: moment }).where(open).returning();
  if (standing.length > 0) return;
  const [person] = await ctx.db.select({ id: people.id }).from(people).where(eq(people.id, event.personId));
  if (!person) return;
  await ctx.db.insert(workHolds).values({
    rigId: event.rigId,
    personId: event.personId,
    reason: 'begun at the rig',
    beganAt: moment,
    standstillAt: moment,
  });
}
