import type { AgentConfig } from '@/agent/config';
import type { AgentEdges } from '@/agent/edges';
import { rigsMeaning } from '@/agent/link/ports';
import type { PortFinding, Problem } from './findings';

/** The ports that are there, and which rig of the configuration means which; opens none. */
export async function lookAtPorts(
  { rigs }: Pick<AgentConfig, 'rigs'>,
  { listPorts }: Pick<AgentEdges, 'listPorts'>,
  problems: Problem[],
): Promise<PortFinding[]> {
  try {
    return (await listPorts()).map((seen) => ({ ...seen, rigs: rigsMeaning(seen, rigs) }));
  } catch (error) {
    problems.push({
      about: 'ports',
      code: 'ports-unlisted',
      says: `The ports cannot be listed: ${error instanceof Error ? error.message : 'no reason was given'}.`,
      toDo: 'Install udev ("udevadm" must be there), or give each rig\'s port by its path.',
    });
    return [];
  }
}
