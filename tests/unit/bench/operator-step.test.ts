import { describe, expect, it } from 'vitest';
import { operatorStep } from '@/scripts/bench/floor/operator-step';

const calm = { programHeld: true, holdReason: null, piecesToMeasure: [] };
const stepOf = (run: Parameters<typeof operatorStep>[0]['run']) => operatorStep({ name: 'Curlew', run });

describe("the bench's operator", () => {
  it.each([
    { run: null, step: null },
    { run: { ...calm, state: 'prepared' as const }, step: 'start' },
    { run: { ...calm, state: 'prepared' as const, programHeld: false }, step: null },
    { run: { ...calm, state: 'cutting' as const }, step: null },
    { run: { ...calm, state: 'ended' as const }, step: 'clear-tray' },
    {
      run: { ...calm, state: 'held' as const, holdReason: 'first-pieces' as const, piecesToMeasure: [1, 2] },
      step: 'measure',
    },
    { run: { ...calm, state: 'held' as const, holdReason: 'first-pieces' as const }, step: 'go-on' },
  ])('does $step where the run is $run.state', ({ run, step }) => {
    expect(stepOf(run)).toBe(step);
  });

  it('gives up where a run is held for anything else', () => {
    expect(() => stepOf({ ...calm, state: 'held', holdReason: 'misfeed' })).toThrow(
      'Curlew is held: misfeed',
    );
  });
});
