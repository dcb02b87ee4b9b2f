import { eq } from 'drizzle-orm';
import type { rigs } from '@/db/schema/rigs';
import { runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import type { ServiceContext } from '../context';
import { lockRig } from '../rigs/lock-rig';
import { runColumns, type RunRow } from './run-columns';

export interface LockedRun {
  rig: typeof rigs.$inferSelect;
  run: RunRow;
}

/**
 * A run and its rig, locked until the transaction ends; always the rig first, so that nobody waits in a circle.
 * @throws EllwandError `not-found`
 */
export async function lockRun(ctx: ServiceContext, runId: string): Promise<LockedRun> {
  const [found] = await ctx.db.select({ rigId: runs.rigId }).from(runs).where(eq(runs.id, runId));
  if (!found) throw new EllwandError('not-found');
  const rig = await lockRig(ctx, found.rigId);
  const [run] = await ctx.db.select(runColumns).from(runs).where(eq(runs.id, runId)).for('update');
  if (!run) throw new EllwandError('not-found');
  return { rig, run };
}
