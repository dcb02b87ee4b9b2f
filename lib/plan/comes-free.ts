import { SILENT_AFTER_MS } from '@/lib/fleet/rig-state';
import type { RigReport } from '@/lib/protocol/report';
import { IDLE_RUNNERS } from './busy';

type Told = Pick<RigReport, 'port' | 'workHold' | 'runner'>;

function couldTakeWork({ port, workHold, runner }: Told): boolean {
  return port === 'open' && !workHold && IDLE_RUNNERS.includes(runner);
}

/** Whether a rig could take work by this report and could not by what was heard before: the moment to dispatch. */
export function comesFree(
  last: { report: Told; heardAtMs: number } | null,
  next: Told,
  nowMs: number,
): boolean {
  if (!couldTakeWork(next)) return false;
  const wasSilent = last === null || nowMs - last.heardAtMs > SILENT_AFTER_MS;
  return wasSilent || !couldTakeWork(last.report);
}
