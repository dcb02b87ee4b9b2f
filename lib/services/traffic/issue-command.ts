import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { rigReports, rigs } from '@/db/schema/rigs';
import { commands } from '@/db/schema/traffic';
import { EllwandError } from '@/lib/errors';
import { SILENT_AFTER_MS } from '@/lib/fleet/rig-state';
import { type Command, commandSchema, type MovingCommand, type QuietCommand } from '@/lib/protocol/commands';
import { COMMAND_MAX_AGE_MS } from '@/lib/protocol/version';
import type { ServiceContext } from '../context';
import { tell } from '../tell';

type Filled = 'id' | 'personId' | 'fence' | 'issuedAt' | 'challenge';
type Without<Union, Keys extends PropertyKey> = Union extends unknown ? Omit<Union, Keys> : never;

/** What a caller says of a command; the rest of the envelope is filled in here. */
export type Order = Without<Command, Filled>;

/** A code on a display, or a pause, asked for long ago would only puzzle whoever stands there now. */
const QUIET_MAX_AGE_MS: Partial<Record<QuietCommand['kind'], number>> = {
  'show-code': 30_000,
  pause: 60_000,
};

function isMoving(order: Order): order is Without<MovingCommand, Filled> {
  return order.kind === 'start-run' || order.kind === 'go-on';
}

async function rigOf(ctx: ServiceContext, rigId: string) {
  const [rig] = await ctx.db
    .select({ agentId: rigs.agentId, fence: rigs.fence, seen: rigReports })
    .from(rigs)
    .leftJoin(rigReports, eq(rigReports.rigId, rigs.id))
    .where(eq(rigs.id, rigId));
  if (!rig) throw new EllwandError('not-found');
  if (!rig.agentId) throw new EllwandError('rig-silent', { details: { reason: 'no agent' } });
  return { ...rig, agentId: rig.agentId };
}

/** The nonce of a rig that is heard now. @throws EllwandError `rig-silent`: a silent rig is not told to move. */
function challengeOf(ctx: ServiceContext, seen: typeof rigReports.$inferSelect | null): string {
  const open = seen?.report.port === 'open';
  if (!seen || !open || ctx.now.getTime() - seen.heardAt.getTime() > SILENT_AFTER_MS) {
    throw new EllwandError('rig-silent');
  }
  return seen.report.challenge;
}

/**
 * Writes a command to a rig in the name of `personId`, with the rig's fencing number as of now; it leaves when the
 * caller's transaction commits. Moving ones carry the agent's latest challenge and are dead after 5 s.
 * @throws EllwandError `rig-silent` for a moving command to a silent rig, and for any to a rig without an agent.
 */
export async function issueCommand(ctx: ServiceContext, personId: string, order: Order): Promise<string> {
  const { agentId, fence, seen } = await rigOf(ctx, order.rigId);
  const id = randomUUID();
  const moving = isMoving(order);
  const command = commandSchema.parse({
    ...order,
    id,
    personId,
    fence,
    issuedAt: ctx.now.toISOString(),
    ...(moving ? { challenge: challengeOf(ctx, seen) } : {}),
  });
  const maxAgeMs = moving ? COMMAND_MAX_AGE_MS : QUIET_MAX_AGE_MS[order.kind as QuietCommand['kind']];
  await ctx.db.insert(commands).values({
    id,
    rigId: order.rigId,
    agentId,
    personId,
    kind: command.kind,
    command,
    issuedAt: ctx.now,
    expiresAt: maxAgeMs === undefined ? null : new Date(ctx.now.getTime() + maxAgeMs),
  });
  await tell(ctx, { news: 'command', agentId, commandId: id });
  return id;
}
