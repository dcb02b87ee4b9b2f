import type { PortSeen } from '@/agent/link/ports';
import type { RigReport } from '@/lib/protocol/report';

/** One thing that is wrong, and what a person does about it. */
export interface Problem {
  about: 'configuration' | 'ports' | 'rig' | 'server' | 'journal';
  /** The rig's name in the configuration, where one is meant. */
  rig?: string;
  /** A word to search by; never changes with the wording. */
  code: string;
  says: string;
  toDo: string;
}

export interface PortFinding extends PortSeen {
  /** The rigs of the configuration that mean this port. */
  rigs: string[];
}

/** A rig as it answers; what was not read is null. */
export interface RigFinding extends Partial<Pick<RigReport, 'runner' | 'piecesCut' | 'holdReason'>> {
  rig: string;
  /** As the configuration has it. */
  means: string;
  /** The port that it is at now. */
  path: string | null;
  firmware: RigReport['firmware'];
  signals: RigReport['signals'] | null;
}

export interface ServerFinding {
  address: string;
  reachable: boolean;
  tokenAccepted: boolean;
  /** Server minus this computer, ms; null when no answer told a time. Dates of answers are whole seconds. */
  clockSkewMs: number | null;
}

export interface JournalFinding {
  folder: string;
  sizeBytes: number;
  /** At this size no run is started. */
  boundBytes: number;
  unacknowledged: number;
  damaged: boolean;
}

/** Everything that the doctor saw; `well` when there is nothing to do. */
export interface Findings {
  well: boolean;
  software: string;
  configuration: string;
  /** Whether it was asked of a running agent; then no port was opened. */
  agentRuns: boolean;
  ports: PortFinding[];
  rigs: RigFinding[];
  server: ServerFinding | null;
  journal: JournalFinding | null;
  problems: Problem[];
}
