import { and, eq, inArray } from 'drizzle-orm';
import { runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import type { RunState } from '@/lib/fleet/run';
import type { ServiceContext } from '../context';

/** The states in which a run is under way: begun, and not yet over. */
export const UNDER_WAY: readonly RunState[] = ['cutting', 'paused', 'held'];

/** Refuses what must not change under a run. @throws EllwandError `rig-busy` when the rig's run is in one of `states`. */
export async function requireStandstill(
  ctx: ServiceContext,
  rigId: string,
  states: readonly RunState[] = UNDER_WAY,
): Promise<void> {
  const [run] = await ctx.db
    .select({ state: runs.state })
    .from(runs)
    .where(and(eq(runs.rigId, rigId), inArray(runs.state, [...states])));
  if (run) throw new EllwandError('rig-busy', { details: { runState: run.state } });
}
