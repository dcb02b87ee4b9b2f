import { describe, expect, it } from 'vitest';
import { batchState, type BatchState } from '@/lib/fleet/batch-state';
import type { LotState } from '@/lib/fleet/lot';

const cases: [LotState[], BatchState][] = [
  [[], 'queued'],
  [['waiting'], 'queued'],
  [['waiting', 'given'], 'queued'],
  [['waiting', 'running'], 'cutting'],
  [['cut'], 'cutting'],
  [['bagged', 'waiting'], 'cutting'],
  [['bagged', 'bagged'], 'done'],
  [['bagged', 'withdrawn'], 'done'],
  [['withdrawn'], 'queued'],
];

describe('the state of a batch', () => {
  it.each(cases)('with lots %j is %s', (lots, state) => {
    expect(batchState({ queued: true, withdrawn: false, lots })).toBe(state);
  });

  it('is draft until it is queued, and withdrawn whatever its lots do', () => {
    expect(batchState({ queued: false, withdrawn: false, lots: [] })).toBe('draft');
    expect(batchState({ queued: true, withdrawn: true, lots: ['running'] })).toBe('withdrawn');
    expect(batchState({ queued: false, withdrawn: true, lots: [] })).toBe('withdrawn');
  });
});
