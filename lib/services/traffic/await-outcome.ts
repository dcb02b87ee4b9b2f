import { setTimeout as wait } from 'node:timers/promises';
import { eq } from 'drizzle-orm';
import { commands } from '@/db/schema/traffic';
import { EllwandError } from '@/lib/errors';
import type { CommandOutcome } from '@/lib/schemas/run';
import type { ServiceContext } from '../context';

/** A person at a button waits this long for the rig; later news come by the event stream. */
export const OUTCOME_WAIT_MS = 3_000;

const FIRST_LOOK_MS = 20;
const SLOWEST_LOOK_MS = 160;

async function outcomeOf(ctx: ServiceContext, commandId: string): Promise<CommandOutcome> {
  const [found] = await ctx.db
    .select({ state: commands.state, answer: commands.answer })
    .from(commands)
    .where(eq(commands.id, commandId));
  if (!found) throw new EllwandError('not-found');
  const { state, answer } = found;
  if (state === 'expired') return { commandId, outcome: 'refused', code: 'command-late' };
  if (!answer) return { commandId, outcome: 'waiting', code: null };
  return { commandId, outcome: answer.outcome, code: answer.outcome === 'refused' ? answer.code : null };
}

/**
 * What became of a command within `waitMs`; call it after the transaction that issued it. It looks ever more rarely
 * (20 ms to 160 ms, some 20 looks in all) instead of holding a listening connection for each button pressed.
 */
export async function awaitOutcome(
  ctx: ServiceContext,
  commandId: string,
  waitMs = OUTCOME_WAIT_MS,
): Promise<CommandOutcome> {
  let waitedMs = 0;
  let lookMs = FIRST_LOOK_MS;
  for (;;) {
    const outcome = await outcomeOf(ctx, commandId);
    if (outcome.outcome !== 'waiting' || waitedMs >= waitMs) return outcome;
    await wait(lookMs);
    waitedMs += lookMs;
    lookMs = Math.min(lookMs * 2, SLOWEST_LOOK_MS);
  }
}
