import { type CommandOutcome, showCodeSchema } from '@/lib/schemas/run';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { awaitOutcome } from '../traffic/await-outcome';
import { issueCommand } from '../traffic/issue-command';
import { inTransaction } from '../transaction';

/** Has the rig's display show the code that proves presence. @throws EllwandError `rig-silent` without an agent. */
export async function showCode({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<CommandOutcome> {
  const { personId } = authorise(ctx, 'runs.operate');
  const { rigId } = parseInput(showCodeSchema, input);
  const commandId = await inTransaction(ctx, (inner) =>
    issueCommand(inner, personId, { kind: 'show-code', rigId }),
  );
  return awaitOutcome(ctx, commandId);
}
