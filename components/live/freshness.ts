import { SILENT_AFTER_MS, type RigState } from '@/lib/fleet/rig-state';
import type { RigDto } from '@/lib/schemas/floor';

/** What may be said of a rig now: an answer that has grown old turns into `silent` by itself. */
export function stateNow(rig: RigDto, nowMs: number): RigState {
  if (rig.state === 'out of service' || rig.state === 'silent') return rig.state;
  return rig.heardAt !== null && nowMs - Date.parse(rig.heardAt) <= SILENT_AFTER_MS ? rig.state : 'silent';
}
