import { bindRigsSchema } from '@/lib/schemas/setup-agents';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { bindTo } from './bind';
import { lockAgent } from './lock-agent';

/** Says which rigs an agent serves; it hears of it at once. @throws EllwandError `rig-busy` when a changed rig has a run. */
export async function bindRigs({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  const actor = authorise(ctx, 'agents.write');
  const { agentId, rigIds } = parseInput(bindRigsSchema, input);
  return inTransaction({ ...ctx, actor }, async (inner) => {
    await lockAgent(inner, agentId);
    await bindTo(inner, agentId, rigIds);
    await audit(inner, 'agent.bind', `agent:${agentId}`, { rigIds });
  });
}
