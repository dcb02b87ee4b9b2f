import { ConfigError, loadConfig, type AgentConfig } from '@/agent/config';
import type { AgentEdges } from '@/agent/edges';
import { SOFTWARE } from '@/agent/software';
import { askForState } from '@/agent/stop/stop-socket';
import type { AgentState } from '@/agent/stop/state';
import { loadCachedRigs } from '@/agent/uplink/rigs-cache';
import type { Findings, Problem } from './findings';
import { lookAtJournal } from './journal';
import { lookAtPorts } from './ports';
import { lookAtRigs } from './rigs';
import { lookAtServer } from './server';
import { problemsOfState, rigOfState } from './state';

/**
 * Looks at everything an agent needs, and changes nothing: a running agent is asked for what it knows and keeps its
 * ports. Only where none runs are ports opened, and not that of a rig with a run, which an opening may reset.
 */
export async function examine(
  configPath: string,
  edgesFor: (config: AgentConfig) => Promise<AgentEdges>,
): Promise<Findings> {
  const blank = { software: SOFTWARE, configuration: configPath, ports: [], rigs: [] };
  let config: AgentConfig;
  try {
    config = await loadConfig(configPath);
  } catch (error) {
    if (!(error instanceof ConfigError)) throw error;
    const problems = problemsOfConfig(error);
    return { ...blank, well: false, agentRuns: false, server: null, journal: null, problems };
  }
  const edges = await edgesFor(config);
  const state = await askForState(config.dataDir);
  const problems: Problem[] = [];
  const ports = await lookAtPorts(config, edges, problems);
  const { server, bound } = await lookAtServer(config, edges, problems);
  const { journal, runs, mayProbe, release } = await lookAtJournal(config, state !== null, problems);
  try {
    const known = bound ?? (await loadCachedRigs(config.dataDir));
    const rigs = state
      ? state.rigs.map((rig) => rigOfState(rig, config, ports))
      : await lookAtRigs({ config, edges, ports, known, runs, mayProbe, problems });
    if (state) problems.push(...problemsOfState(state));
    return {
      ...blank,
      well: problems.length === 0,
      agentRuns: state !== null,
      ports,
      rigs,
      server,
      journal: journal && withState(journal, state),
      problems,
    };
  } finally {
    await release();
  }
}

function withState<Journal extends { unacknowledged: number }>(
  journal: Journal,
  state: AgentState | null,
): Journal {
  return state ? { ...journal, unacknowledged: state.journal.unacknowledged } : journal;
}

function problemsOfConfig({ file, problems }: ConfigError): Problem[] {
  return problems.map(({ line, path, message }) => ({
    about: 'configuration',
    code: 'config-wrong',
    says: `${file}${line === null ? '' : `, line ${line}`}: ${path === '' ? '' : `"${path}" `}${message}`,
    toDo: 'Correct that line and ask again.',
  }));
}
