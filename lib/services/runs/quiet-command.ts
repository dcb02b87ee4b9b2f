import type { Right } from '@/lib/fleet/rights';
import type { CommandOutcome } from '@/lib/schemas/run';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { PersonActor, ServiceContext } from '../context';
import { awaitOutcome } from '../traffic/await-outcome';
import { issueCommand, type Order } from '../traffic/issue-command';
import { inTransaction } from '../transaction';
import { type LockedRun, lockRun } from './lock-run';

interface Ask {
  right: Right;
  runId: string;
  /** Looks whether it may be asked now, and says what to ask. */
  order: (locked: LockedRun, inner: ServiceContext<PersonActor>) => Order | Promise<Order>;
}

/** A command about a run after which nothing moves that did not move before; answers what the rig said within 3 s. */
export async function askRun(ctx: ServiceContext, { right, runId, order }: Ask): Promise<CommandOutcome> {
  const actor = authorise(ctx, right);
  const commandId = await inTransaction({ ...ctx, actor }, async (inner) => {
    const asked = await order(await lockRun(inner, runId), inner);
    const id = await issueCommand(inner, actor.personId, asked);
    await audit(inner, `run.${asked.kind}`, `run:${runId}`, { commandId: id });
    return id;
  });
  return awaitOutcome(ctx, commandId);
}
