import type { AgentConfig } from '@/agent/config';
import { describeWish } from '@/agent/link/ports';
import type { AgentState } from '@/agent/stop/state';
import type { PortFinding, Problem, RigFinding } from './findings';
import { signalProblems } from './signals';

/** A rig of a running agent. */
export function rigOfState(
  { rig, report }: AgentState['rigs'][number],
  config: Pick<AgentConfig, 'rigs'>,
  ports: readonly PortFinding[],
): RigFinding {
  const wish = config.rigs.find((entry) => entry.rig === rig)?.port;
  const seen = ports.filter(({ rigs }) => rigs.includes(rig));
  return {
    rig,
    means: wish === undefined ? 'not in this configuration' : describeWish(wish),
    path: typeof wish === 'string' ? wish : (seen[0]?.path ?? null),
    firmware: report?.firmware ?? null,
    signals: report?.signals ?? null,
    ...(report && { runner: report.runner, piecesCut: report.piecesCut, holdReason: report.holdReason }),
  };
}

/** What a running agent itself finds wrong. */
export function problemsOfState({ rigs, journal, link }: AgentState): Problem[] {
  return [
    ...rigs.flatMap(({ rig, report }) => (report ? problemsOfRig(rig, report) : [notBound(rig)])),
    ...link.map(({ topic, code, text }): Problem => ({
      about: 'server',
      code,
      says: `${topic}: ${text}`,
      toDo: text,
    })),
    ...(journal.full
      ? [
          {
            about: 'journal',
            code: 'journal-full',
            says: 'The journal is full or its disk has no room: no run is started.',
            toDo: 'Make room on the disk, or let the agent reach its server so that it can hand over what it keeps.',
          } as const,
        ]
      : []),
  ];
}

function problemsOfRig(rig: string, report: NonNullable<AgentState['rigs'][number]['report']>): Problem[] {
  const { port, portProblem, signals } = report;
  const says = portProblem ?? 'The port is not open yet.';
  const toDo =
    port === 'refused'
      ? 'Do what the reason says, then plug the rig in again.'
      : 'Look at the cable, the power and the port in the configuration.';
  if (port !== 'open') return [{ about: 'rig', rig, code: `port-${port}`, says, toDo }];
  const noted: Problem[] =
    portProblem === null
      ? []
      : [{ about: 'rig', rig, code: 'port-noted', says, toDo: "Correct the rig's profile in the set-up." }];
  return [...noted, ...signalProblems(rig, signals)];
}

export function notBound(rig: string): Problem {
  return {
    about: 'rig',
    rig,
    code: 'rig-not-bound',
    says: 'The server has not given this rig to this agent.',
    toDo: 'Give it the same name as in the set-up, and bind it to this agent there.',
  };
}
