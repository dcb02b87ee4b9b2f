import type { Log } from '@/agent/log';
import type { RigReport } from '@/lib/protocol/report';

/** Logs what is wrong with a rig's port when that changes, not at each report. */
export function watchPort(rig: string, log: Log): (report: Pick<RigReport, 'port' | 'portProblem'>) => void {
  let told: string | null = null;
  return ({ port, portProblem }) => {
    // Each try passes through `opening`, which says nothing new.
    if (port === 'opening' || portProblem === told) return;
    told = portProblem;
    if (portProblem !== null) log({ level: 'warning', rig, code: `port-${port}`, message: portProblem });
  };
}
