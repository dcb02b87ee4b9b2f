import { EllwandError } from '@/lib/errors';
import { refuseStart, type StartFacts } from '@/lib/fleet/start-conditions';
import type { CommandOutcome } from '@/lib/schemas/run';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { PersonActor, ServiceContext } from '../context';
import { awaitOutcome } from '../traffic/await-outcome';
import { issueCommand, type Order } from '../traffic/issue-command';
import { inTransaction } from '../transaction';
import { type LockedRun, lockRun } from './lock-run';
import { readStartFacts } from './read-start-facts';

type MovingOrder = Extract<Order, { kind: 'start-run' | 'go-on' }>;
type Own = Pick<MovingOrder, 'conditions' | 'presenceCode' | 'rigId' | 'runId'>;

/** What start and go-on have in common: law 5, then the command, then the rig's answer for at most 3 s. */
export async function moveRun(
  ctx: ServiceContext,
  {
    action,
    runId,
    presenceCode,
  }: { action: StartFacts['action']; runId: string; presenceCode: string | null },
  orderOf: (inner: ServiceContext<PersonActor>, locked: LockedRun, own: Own) => Promise<MovingOrder>,
): Promise<CommandOutcome> {
  const actor = authorise(ctx, 'runs.operate');
  const commandId = await inTransaction({ ...ctx, actor }, async (inner) => {
    const locked = await lockRun(inner, runId);
    const { facts, conditions } = await readStartFacts(inner, locked, action, presenceCode);
    const refusal = refuseStart(facts);
    if (refusal) throw new EllwandError(refusal);
    if (!conditions) throw new EllwandError('notes-not-acknowledged');
    const order = await orderOf(inner, locked, { rigId: locked.rig.id, runId, presenceCode, conditions });
    const id = await issueCommand(inner, actor.personId, order);
    await audit(inner, `run.${action}`, `run:${runId}`, { commandId: id });
    return id;
  });
  return awaitOutcome(ctx, commandId);
}
