import type { HoldReason } from './run';

/** What needs a person. 1 is urgent, 3 can wait until the round. */
export const ALARM_PRIORITIES = {
  'rig silent': 1,
  'guard opened in a run': 1,
  'heater warm in a run': 1,
  'surplus pieces': 1,
  'journal conflict': 1,
  'run held': 2,
  'piece in doubt': 2,
  'first pieces to measure': 2,
  'program refused': 2,
  'tray to clear': 3,
} as const;

export type AlarmKind = keyof typeof ALARM_PRIORITIES;

/** Which alarm a held run raises. */
export function alarmOfHold(reason: HoldReason): AlarmKind {
  switch (reason) {
    case 'first-pieces':
      return 'first pieces to measure';
    case 'doubt':
      return 'piece in doubt';
    case 'guard-open':
      return 'guard opened in a run';
    case 'heater-warm':
      return 'heater warm in a run';
    default:
      return 'run held';
  }
}
