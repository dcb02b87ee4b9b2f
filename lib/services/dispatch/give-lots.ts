import { and, eq, sql } from 'drizzle-orm';
import { lots } from '@/db/schema/batches';
import { rigs } from '@/db/schema/rigs';
import { EllwandError, type ErrorCode } from '@/lib/errors';
import { chooseGifts, fits, type Gift } from '@/lib/plan/choose';
import { speakTimeIn } from '@/lib/plan/spoken-time';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { prepareRun } from '../runs/prepare-run';
import { inTransaction } from '../transaction';
import { readWorkshop } from '../workshop/read-workshop';
import { selectLotsToGive } from './lots-to-give';
import { selectRigsToFill } from './rigs-to-fill';
import { writeReasons } from './write-reasons';

/** One dispatch at a time: the others wait, then find what is left. */
const DISPATCH_LOCK = 732_002;

/** What a rig or lot may have become since it was read; the next look finds it so. */
const CHANGED: readonly ErrorCode[] = [
  'rig-busy',
  'tray-not-cleared',
  'out-of-service',
  'wrong-wire',
  'rig-silent',
  'illegal-step',
];

/** Takes rig and lot for this transaction. False when somebody else has one of them in hand, or they changed. */
async function takeBoth(ctx: ServiceContext, { lotId, rigId }: Gift): Promise<boolean> {
  // Always the rig first, as everybody does; a row in somebody's hands is passed over, never waited for.
  const rig = await ctx.db
    .select({ id: rigs.id })
    .from(rigs)
    .where(eq(rigs.id, rigId))
    .for('update', { skipLocked: true });
  if (rig.length === 0) return false;
  const lot = await ctx.db
    .select({ id: lots.id })
    .from(lots)
    .where(and(eq(lots.id, lotId), eq(lots.state, 'waiting')))
    .for('update', { skipLocked: true });
  if (lot.length === 0) return false;
  const [free] = await selectRigsToFill(ctx, rigId);
  const [waiting] = await selectLotsToGive(ctx, eq(lots.id, lotId));
  return free !== undefined && waiting !== undefined && free.busy === null && fits(waiting, free);
}

/** Why a lot was not given after all; null when it was. An empty reason: look again. */
async function give(ctx: ServiceContext, gift: Gift): Promise<string | null> {
  try {
    return await inTransaction(ctx, async (inner) => {
      if (!(await takeBoth(inner, gift))) return '';
      const prepared = await prepareRun({ ctx: inner, input: gift });
      return prepared.ok ? null : prepared.reason;
    });
  } catch (error) {
    if (error instanceof EllwandError && CHANGED.includes(error.code)) return '';
    throw error;
  }
}

/**
 * Gives waiting lots to free rigs by priority and due time, each gift with its run and program in one transaction, and
 * writes the reason to those that wait on. Run by the worker; may run any number of times, also at once, without
 * giving a lot or a rig twice (law 4). Answers what was given.
 */
export async function giveLots({ ctx }: { ctx: ServiceContext }): Promise<Gift[]> {
  authoriseSystem(ctx);
  return inTransaction(ctx, async (inner) => {
    await inner.db.execute(sql`select pg_advisory_xact_lock(${DISPATCH_LOCK})`);
    const waiting = await selectLotsToGive(inner);
    if (waiting.length === 0) return [];
    const { timeZone } = await readWorkshop({ ctx: inner });
    const spokenTime = speakTimeIn(timeZone, inner.now);
    const first = chooseGifts(waiting, await selectRigsToFill(inner), spokenTime);
    const given: Gift[] = [];
    const refused = new Map<string, string>();
    for (const gift of first.gifts) {
      const reason = await give(inner, gift);
      if (reason === null) given.push(gift);
      else if (reason !== '') refused.set(gift.lotId, reason);
    }
    await writeReasons(inner, waiting, new Map([...first.reasons, ...refused]));
    return given;
  });
}
