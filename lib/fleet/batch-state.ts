import type { LotState } from './lot';

/**
 * draft: not handed to the rigs. queued: all its lots still wait or stand ready on a rig. cutting: something of it is
 * cut or being cut. done: everything is in bags. withdrawn: nothing more is given; what was cut stays counted.
 */
export const BATCH_STATES = ['draft', 'queued', 'cutting', 'done', 'withdrawn'] as const;
export type BatchState = (typeof BATCH_STATES)[number];

/** The facts a batch's state is derived from; nothing stores the state itself. `lots` in any order. */
export interface BatchFacts {
  queued: boolean;
  withdrawn: boolean;
  lots: readonly LotState[];
}

const BEGUN: readonly LotState[] = ['running', 'cut', 'bagged'];

/** The one word for a batch. */
export function batchState(facts: BatchFacts): BatchState {
  if (facts.withdrawn) return 'withdrawn';
  if (!facts.queued) return 'draft';
  const counting = facts.lots.filter((state) => state !== 'withdrawn');
  if (counting.length > 0 && counting.every((state) => state === 'bagged')) return 'done';
  return counting.some((state) => BEGUN.includes(state)) ? 'cutting' : 'queued';
}
