import type { Transitions } from './transitions';

/**
 * waiting: on no rig. given: on a rig, not started. running: its run has begun. cut: the run is over and the
 * tray holds the pieces. bagged: counted out of the tray. withdrawn: not to be cut any more.
 */
export const LOT_STATES = ['waiting', 'given', 'running', 'cut', 'bagged', 'withdrawn'] as const;
export type LotState = (typeof LOT_STATES)[number];

export const LOT_TRANSITIONS: Transitions<LotState> = {
  waiting: ['given', 'withdrawn'],
  given: ['waiting', 'running', 'withdrawn'],
  running: ['cut'],
  cut: ['bagged', 'waiting', 'withdrawn'],
  bagged: [],
  withdrawn: [],
};
