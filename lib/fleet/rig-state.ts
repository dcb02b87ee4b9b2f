import type { RunState } from './run';

/** The plain words for what a rig is doing. */
export const RIG_STATES = [
  'ready',
  'cutting',
  'paused',
  'held',
  'blocked',
  'work hold',
  'tray full',
  'silent',
  'out of service',
] as const;
export type RigState = (typeof RIG_STATES)[number];

/** A rig that was not heard for this long is shown as silent: it may still be moving. */
export const SILENT_AFTER_MS = 8_000;

/** The facts a rig's state is derived from; nothing stores the state itself. */
export interface RigFacts {
  outOfService: boolean;
  workHold: boolean;
  /** ms since the agent last reported this rig with its port open; null: never heard. */
  heardAgoMs: number | null;
  connected: boolean;
  guard: 'closed' | 'open' | 'unknown' | 'not fitted';
  runState: RunState | null;
}

/** The one word for the rig, the most restrictive first. */
export function rigState(facts: RigFacts): RigState {
  if (facts.outOfService) return 'out of service';
  if (facts.heardAgoMs === null || facts.heardAgoMs > SILENT_AFTER_MS || !facts.connected) return 'silent';
  if (facts.workHold) return 'work hold';
  if (facts.guard === 'open') return 'blocked';
  switch (facts.runState) {
    case 'ended':
    case 'released':
      return 'tray full';
    case 'held':
      return 'held';
    case 'paused':
      return 'paused';
    case 'cutting':
      return 'cutting';
    default:
      return 'ready';
  }
}
