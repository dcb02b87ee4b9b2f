import type { Clock } from './clock';
import type { OpenPort } from './link/port';
import type { ListPorts } from './link/ports';
import type { Log } from './log';

/** Everything an agent is made with that is not its own arithmetic; `agent/main.ts` has the real ones. */
export interface AgentEdges {
  clock: Clock;
  /** In [0, 1). */
  random: () => number;
  randomId: () => string;
  /** 16 to 64 characters nobody can guess. */
  randomChallenge: () => string;
  /** Four digits for a display. */
  randomCode: () => string;
  openPort: OpenPort;
  listPorts: ListPorts;
  /** Calls of the server alone. */
  fetch: typeof fetch;
  log: Log;
}
