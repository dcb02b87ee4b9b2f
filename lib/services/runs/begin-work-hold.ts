import { and, eq, isNull } from 'drizzle-orm';
import { workHolds } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { beginWorkHoldSchema, type CommandOutcome } from '@/lib/schemas/run';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { lockRig } from '../rigs/lock-rig';
import { causes, tell } from '../tell';
import { awaitOutcome } from '../traffic/await-outcome';
import { issueCommand } from '../traffic/issue-command';
import { inTransaction } from '../transaction';

/**
 * "I am working on this rig." It holds for the server at once; the rig's answer says that it stands still. Nothing for
 * a rig without an agent, which moves nothing of ours.
 * @throws EllwandError `work-hold` when somebody's hold stands already.
 */
export async function beginWorkHold({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<CommandOutcome | undefined> {
  const { personId } = authorise(ctx, 'rigs.hold');
  const { rigId, reason } = parseInput(beginWorkHoldSchema, input);
  const commandId = await inTransaction(ctx, async (inner) => {
    const rig = await lockRig(inner, rigId);
    const [standing] = await inner.db
      .select({ personId: workHolds.personId })
      .from(workHolds)
      .where(and(eq(workHolds.rigId, rigId), isNull(workHolds.endedAt)));
    if (standing) throw new EllwandError('work-hold', { details: { personId: standing.personId } });
    await inner.db.insert(workHolds).values({ rigId, personId, reason, beganAt: inner.now });
    await audit(inner, 'work-hold.begin', `rig:${rigId}`, { reason });
    await tell(inner, { news: 'rig', rigId });
    await causes(inner, { topic: 'dispatch', payload: { because: 'work hold begun' } });
    return rig.agentId ? issueCommand(inner, personId, { kind: 'begin-work-hold', rigId }) : null;
  });
  return commandId === null ? undefined : awaitOutcome(ctx, commandId);
}
