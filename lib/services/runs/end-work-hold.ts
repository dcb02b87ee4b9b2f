import { and, eq, isNull } from 'drizzle-orm';
import { workHolds } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { type CommandOutcome, endWorkHoldSchema } from '@/lib/schemas/run';
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
 * That same person, at the rig, ends their work hold.
 * @throws EllwandError `work-hold` for anybody else, `illegal-step` when none stands.
 */
export async function endWorkHold({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<CommandOutcome | undefined> {
  const { personId } = authorise(ctx, 'rigs.hold');
  const { rigId } = parseInput(endWorkHoldSchema, input);
  const commandId = await inTransaction(ctx, async (inner) => {
    const rig = await lockRig(inner, rigId);
    const open = and(eq(workHolds.rigId, rigId), isNull(workHolds.endedAt));
    const [standing] = await inner.db.select().from(workHolds).where(open).for('update');
    if (!standing) throw new EllwandError('illegal-step');
    if (standing.personId !== personId) throw new EllwandError('work-hold');
    await inner.db
      .update(workHolds)
      .set({ endedAt: inner.now, endedBy: personId })
      .where(eq(workHolds.id, standing.id));
    await audit(inner, 'work-hold.end', `rig:${rigId}`);
    await tell(inner, { news: 'rig', rigId });
    await causes(inner, { topic: 'dispatch', payload: { because: 'work hold ended' } });
    return rig.agentId ? issueCommand(inner, personId, { kind: 'end-work-hold', rigId }) : null;
  });
  return commandId === null ? undefined : awaitOutcome(ctx, commandId);
}
