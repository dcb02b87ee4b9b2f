import type { ControlInput } from '@/agent/virtual/core/control-requests';
import type { MisfeedCause } from '@/lib/fleet/run';

/** What is done to one rig, its agent, its cable or its network, or by a person at it. Durations on the wall clock. */
export type RigFault =
  | { kind: 'agent-killed'; downMs: number }
  | { kind: 'rig-power'; offMs: number }
  | { kind: 'board-reset' }
  | { kind: 'unplugged'; forMs: number }
  | {
      kind: 'noise';
      noise: Extract<ControlInput, { do: 'noise' }>['kind'];
      direction: 'in' | 'out';
      bytes: number;
    }
  | { kind: 'ok-spoilt'; fault: Extract<ControlInput, { do: 'ok' }>['fault'] }
  | { kind: 'mute'; forMs: number }
  | { kind: 'network-cut'; forMs: number }
  | { kind: 'network-slow'; forMs: number; delayMs: number }
  | { kind: 'network-twice'; calls: number }
  | { kind: 'network-late'; calls: number }
  | { kind: 'answer-lost'; calls: number }
  | { kind: 'disk-full'; forMs: number }
  | { kind: 'guard'; openMs: number }
  | { kind: 'wire-out'; forMs: number }
  | { kind: 'pause' }
  | { kind: 'stop' }
  | { kind: 'misfeed'; cause: MisfeedCause }
  /** The plug pulled in it is the motors', the cable's, or none. */
  | { kind: 'work-hold'; forMs: number; pull: 'motors' | 'cable' | 'nothing' };

/** What is done to the house that all rigs share. */
export type HouseFault =
  | { kind: 'server-killed' }
  | { kind: 'worker-killed' }
  | { kind: 'redis-emptied' }
  | { kind: 'redis-restarted' }
  | { kind: 'database-restarted' };

export type RigFaultKind = RigFault['kind'];
export type HouseFaultKind = HouseFault['kind'];
