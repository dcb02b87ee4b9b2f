import type { AgentConfig } from '@/agent/config';
import type { AgentEdges } from '@/agent/edges';
import { describeWish, portFinder, type RigPort } from '@/agent/link/ports';
import type { BoundRigs } from '@/lib/protocol/pairing';
import type { PortFinding, Problem, RigFinding } from './findings';
import { notBound } from './state';
import { probe } from './probe';
import { signalProblems } from './signals';

interface Looking {
  config: Pick<AgentConfig, 'rigs' | 'dataDir'>;
  edges: AgentEdges;
  ports: readonly PortFinding[];
  /** The rigs as the server tells or told them; null: never heard. */
  known: BoundRigs | null;
  /** Ids of the rigs that have a run. */
  runs: ReadonlySet<string>;
  mayProbe: boolean;
  problems: Problem[];
}

/** Opens one port after the other and asks who is there; for when no agent runs. */
export async function lookAtRigs(looking: Looking): Promise<RigFinding[]> {
  const findings: RigFinding[] = [];
  for (const wanted of looking.config.rigs) findings.push(await lookAtRig(looking, wanted));
  return findings;
}

async function lookAtRig(looking: Looking, wanted: RigPort): Promise<RigFinding> {
  const { config, edges, ports, known, runs, mayProbe, problems } = looking;
  const { rig } = wanted;
  const tell = (code: string, says: string, toDo: string) =>
    problems.push({ about: 'rig', rig, code, says, toDo });
  const finding: RigFinding = {
    rig,
    means: describeWish(wanted.port),
    path: null,
    firmware: null,
    signals: null,
  };
  const bound = known?.rigs.find(({ rigId, name }) => rigId === rig || name === rig);
  if (known && !bound) problems.push(notBound(rig));
  const found = await portFinder(wanted, config.rigs, () => Promise.resolve([...ports]))();
  if (!found.found) {
    tell(
      found.refused ? 'port-refused' : 'port-missing',
      found.reason,
      'Do what the reason says, then ask again.',
    );
    return finding;
  }
  const { path } = found;
  if (!mayProbe) return { ...finding, path };
  if (bound && runs.has(bound.rigId)) {
    const says = 'A run is under way by the journal. Its port was not opened: that may reset the rig.';
    tell('run-under-way', says, 'Start the agent, and ask again.');
    return { ...finding, path };
  }
  const seen = await probe(edges, path, bound?.profile ?? null);
  if (!seen.met) {
    tell(
      seen.code,
      seen.reason,
      'Look at the cable, the power, and whether another program has the port open.',
    );
    return { ...finding, path };
  }
  if (seen.notice !== null) tell('port-noted', seen.notice, "Correct the rig's profile in the set-up.");
  if (seen.signals) problems.push(...signalProblems(rig, seen.signals));
  return { ...finding, path, firmware: seen.firmware, signals: seen.signals };
}
