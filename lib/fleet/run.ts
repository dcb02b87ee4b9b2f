import type { Transitions } from './transitions';

/**
 * prepared: the program is made and on its way to the agent. cutting: trim or pieces. paused: a person asked, it
 * waits at standby. held: a question for a person. ended: no more motion. cleared: tray emptied, bag labelled.
 * dropped: taken off the rig before anything was cut. released: a person took the lot from a silent rig; what the
 * rig reports later is surplus.
 */
export const RUN_STATES = [
  'prepared',
  'cutting',
  'paused',
  'held',
  'ended',
  'cleared',
  'dropped',
  'released',
] as const;
export type RunState = (typeof RUN_STATES)[number];

export const RUN_TRANSITIONS: Transitions<RunState> = {
  prepared: ['cutting', 'held', 'dropped', 'released'],
  cutting: ['paused', 'held', 'ended', 'released'],
  paused: ['cutting', 'held', 'ended', 'released'],
  held: ['cutting', 'paused', 'ended', 'released'],
  ended: ['cleared'],
  cleared: [],
  dropped: [],
  released: ['cleared'],
};

/** A run that still owns its rig. */
export const RUN_ACTIVE: readonly RunState[] = ['prepared', 'cutting', 'paused', 'held', 'ended'];

/** Why a run is held, in the agent's words; each asks a person for something else. */
export const HOLD_REASONS = [
  'first-pieces',
  'misfeed',
  'doubt',
  'guard-open',
  'wire-missing',
  'heater-warm',
  'firmware-refused',
  'firmware-reset',
  'firmware-halted',
  'link-lost',
  'register-foreign',
  'agent-restarted',
  'work-hold',
  'steppers-released',
  'position-wrong',
  'journal-damaged',
] as const;
export type HoldReason = (typeof HOLD_REASONS)[number];

/** Causes of a misfeed; the list that a person picks from. */
export const MISFEED_CAUSES = [
  'slipped',
  'jammed',
  'curled back',
  'not cut through',
  'short',
  'no wire',
  'other',
] as const;
export type MisfeedCause = (typeof MISFEED_CAUSES)[number];
