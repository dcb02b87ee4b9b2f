import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type FoldedRun, foldRunEvent } from '@/lib/fleet/fold';
import { HOLD_REASONS, RUN_STATES, RUN_TRANSITIONS, type RunState } from '@/lib/fleet/run';
import { mayStep } from '@/lib/fleet/transitions';
import type { EventBody } from '@/lib/protocol/events';

type RunEvent = Extract<EventBody, { runId: string }>;

const AT = '2026-12-01T08:00:00.000Z';
const LATER = '2026-12-01T08:00:05.000Z';
const ids = { rigId: 'rig', runId: 'run' };
const named = { ...ids, personId: 'person', commandId: 'command' };

const runIn = (state: RunState): FoldedRun => ({
  state,
  stateSince: AT,
  holdReason: state === 'held' ? 'misfeed' : null,
  holdNote: '',
  doubtPiece: null,
  programHeldAt: null,
  startedAt: null,
  startedBy: null,
  endedAt: null,
  outcome: null,
});

const EVENTS: Record<string, RunEvent> = {
  started: { kind: 'run-started', ...named },
  paused: { kind: 'run-paused', ...ids, personId: null },
  held: { kind: 'run-held', ...ids, reason: 'misfeed', note: 'jam' },
  wentOn: { kind: 'run-went-on', ...named },
  ended: { kind: 'run-ended', ...ids, outcome: 'complete', pieces: 5, personId: null },
  dropped: { kind: 'program-dropped', ...ids },
};

/** From each state, where each event leads; what is not listed changes nothing. */
const STEPS: Record<RunState, Partial<Record<keyof typeof EVENTS, RunState>>> = {
  prepared: { started: 'cutting', held: 'held', dropped: 'dropped' },
  cutting: { paused: 'paused', held: 'held', ended: 'ended' },
  paused: { held: 'held', wentOn: 'cutting', ended: 'ended' },
  held: { paused: 'paused', wentOn: 'cutting', ended: 'ended' },
  ended: {},
  cleared: {},
  dropped: {},
  released: {},
};

const cases = RUN_STATES.flatMap((state) =>
  Object.entries(EVENTS).map(([name, event]) => ({ state, name, event, to: STEPS[state][name] ?? state })),
);

describe('folding what a rig reports into its run', () => {
  it.each(cases)('$name in a run that is $state leads to $to', ({ state, event, to }) => {
    expect(foldRunEvent(runIn(state), event, LATER).run.state).toBe(to);
  });

  it('never takes a step that the table of steps does not have, whatever comes in which order', () => {
    const event = fc.constantFrom(
      ...Object.values(EVENTS),
      ...HOLD_REASONS.map((reason): RunEvent => ({ kind: 'run-held', ...ids, reason, note: '' })),
      { kind: 'piece-doubted', ...ids, piece: 3, wireMm: 1 } as const,
    );
    fc.assert(
      fc.property(fc.constantFrom(...RUN_STATES), fc.array(event, { maxLength: 12 }), (state, events) => {
        let run = runIn(state);
        for (const one of events) {
          const next = foldRunEvent(run, one, LATER).run;
          expect(next.state === run.state || mayStep(RUN_TRANSITIONS, run.state, next.state)).toBe(true);
          run = next;
        }
      }),
    );
  });

  it('keeps who started it and when, from the rig’s own word', () => {
    const { run, lot } = foldRunEvent(runIn('prepared'), { kind: 'run-started', ...named }, LATER);
    expect(run).toMatchObject({ startedBy: 'person', startedAt: LATER, stateSince: LATER });
    expect(lot).toBe('running');
  });

  it.each([
    ['first-pieces', 'first pieces to measure'],
    ['doubt', 'piece in doubt'],
    ['guard-open', 'guard opened in a run'],
    ['heater-warm', 'heater warm in a run'],
    ['misfeed', 'run held'],
    ['link-lost', 'run held'],
  ] as const)('a hold for %s raises "%s" and ends what stood for another reason', (reason, kind) => {
    const { raise, end, run } = foldRunEvent(
      runIn('cutting'),
      { kind: 'run-held', ...ids, reason, note: '' },
      LATER,
    );
    expect(raise.map((alarm) => alarm.kind)).toEqual([kind]);
    expect(end).not.toContain(kind);
    expect(end).toHaveLength(4);
    expect(run.holdReason).toBe(reason);
  });

  it('a second hold changes the reason and not the time since which it is held', () => {
    const { run } = foldRunEvent(
      runIn('held'),
      { kind: 'run-held', ...ids, reason: 'doubt', note: 'x' },
      LATER,
    );
    expect(run).toMatchObject({ holdReason: 'doubt', holdNote: 'x', stateSince: AT });
  });

  it('an open doubt keeps its alarm through a hold for another reason, and the answer ends it', () => {
    const doubted = foldRunEvent(
      runIn('cutting'),
      { kind: 'piece-doubted', ...ids, piece: 3, wireMm: 1 },
      LATER,
    );
    expect(doubted.run.doubtPiece).toBe(3);
    const hold = foldRunEvent(
      doubted.run,
      { kind: 'run-held', ...ids, reason: 'link-lost', note: '' },
      LATER,
    );
    expect(hold.end).not.toContain('piece in doubt');
    const settled: RunEvent = { kind: 'piece-settled', ...ids, piece: 3, answer: 'discard', personId: 'p' };
    expect(foldRunEvent(hold.run, settled, LATER)).toMatchObject({
      run: { doubtPiece: null, state: 'held' },
      end: ['piece in doubt'],
    });
  });

  it('going on and ending answer every hold', () => {
    for (const event of [EVENTS['wentOn'], EVENTS['ended']]) {
      if (!event) throw new Error('There is no such event');
      expect(foldRunEvent(runIn('held'), event, LATER).end).toHaveLength(5);
    }
  });

  it('an end leaves the pieces in the tray, to be cleared by somebody', () => {
    const stopped: RunEvent = { kind: 'run-ended', ...ids, outcome: 'stopped', pieces: 2, personId: null };
    const folded = foldRunEvent(runIn('cutting'), stopped, LATER);
    expect(folded).toMatchObject({ lot: 'cut', run: { outcome: 'stopped', endedAt: LATER } });
    expect(folded.raise.map(({ kind }) => kind)).toEqual(['tray to clear']);
  });
});
