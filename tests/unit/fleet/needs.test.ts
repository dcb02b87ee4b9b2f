import { describe, expect, it } from 'vitest';
import { needsOf } from '@/lib/fleet/needs';
import { floorSentence } from '@/lib/fleet/sentence';
import { aRig, aRun } from './a-rig';

const nothingWaits = { lots: 0, pieces: 0, next: null };
const clock = (at: string) => at.slice(11, 16);

describe('who must go where', () => {
  it('asks nobody while rigs are cutting, out of service or ready without a lot', () => {
    const rigs = [aRig(), aRig({ state: 'cutting', run: aRun() }), aRig({ state: 'out of service' })];
    expect(needsOf(rigs)).toEqual([]);
  });

  it('puts an open guard before a misfeed and a misfeed before a full tray, whatever the bench order', () => {
    const rigs = [
      aRig({ name: 'Full', benchOrder: 1, state: 'tray full', run: aRun({ state: 'ended' }) }),
      aRig({
        name: 'Misfed',
        benchOrder: 2,
        state: 'held',
        run: aRun({ state: 'held', holdReason: 'misfeed' }),
      }),
      aRig({ name: 'Open', benchOrder: 3, state: 'blocked', run: aRun() }),
    ];
    expect(needsOf(rigs).map((need) => need.rigName)).toEqual(['Open', 'Misfed', 'Full']);
  });

  it('says how many first pieces to measure and how many wait for it', () => {
    const run = aRun({
      state: 'held',
      holdReason: 'first-pieces',
      cut: 5,
      pieces: 96,
      piecesToMeasure: [1, 2, 3, 4, 5],
    });
    expect(needsOf([aRig({ state: 'held', run })])[0]?.happened).toBe(
      '5 pieces cut, measure them before the other 91',
    );
  });

  it('says of a silent rig that it may still be moving, only if it had something to do', () => {
    expect(needsOf([aRig({ state: 'silent' })])).toEqual([]);
    expect(needsOf([aRig({ state: 'silent', run: aRun() })])[0]).toMatchObject({ mark: 'danger', rank: 1 });
  });
});

describe('the floor’s first sentence', () => {
  it('counts in words and keeps number and verb together', () => {
    const one = [aRig({ state: 'held', run: aRun({ state: 'held', holdReason: 'doubt' }) })];
    expect(floorSentence(one, needsOf(one), nothingWaits, clock)).toEqual({
      urgent: 'One rig needs somebody.',
      rest: 'None is cutting.',
    });
    const two = [aRig({ state: 'cutting', run: aRun() }), aRig({ state: 'cutting', run: aRun() })];
    expect(floorSentence(two, needsOf(two), nothingWaits, clock)).toEqual({
      urgent: 'Nobody is needed.',
      rest: 'Two are cutting.',
    });
  });

  it('names the batch that is due first and why it waits', () => {
    const waiting = {
      lots: 3,
      pieces: 900,
      next: {
        batchId: aRun().batchId,
        batchName: 'Trainer C',
        dueAt: '2026-12-01T15:40:00.000Z',
        reason: 'No rig has GN 30 AWG loaded.',
      },
    };
    expect(floorSentence([aRig()], [], waiting, clock).rest).toBe(
      'None is cutting. Trainer C is due 15:40 and waits: No rig has GN 30 AWG loaded.',
    );
  });
});
