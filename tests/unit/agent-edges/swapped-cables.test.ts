import { describe, expect, it } from 'vitest';
import { drivenRig, RUN, type DrivenRig } from '../agent/driven-rig';

const FOREIGN = { X: 0, Y: 180009, Z: 8, E: 0 };

/** A run in its third piece, whose cable then goes to a board with another run and is met there. */
function swapped(before: RegExp): { rig: DrivenRig; own: DrivenRig['position'] } {
  const rig = drivenRig({ pieces: 4, lengthMm: 200 });
  rig.start();
  rig.driveTo(/^G92 Y170002/);
  rig.driveTo(before);
  const own = { ...rig.position };
  meetAt(rig, FOREIGN);
  return { rig, own };
}

function meetAt(rig: DrivenRig, position: DrivenRig['position']): void {
  rig.happens({ type: 'lost', failure: 'closed', reason: 'cable' });
  rig.position = { ...position };
  rig.meet();
  rig.driveTo(null);
}

const WHILE_FEEDING = /^G1 E200/;
const WHILE_CUTTING = /^G1 Z5\.5/;

describe('a cable that goes to the board of another run', () => {
  it.each([
    ['while it feeds', WHILE_FEEDING],
    ['while it cuts', WHILE_CUTTING],
  ])('%s: the run is held, nothing moves, nothing is doubted and no way goes on', (_when, before) => {
    const { rig } = swapped(before);
    const sent = rig.sent.length;
    expect(rig.run.hold).toBe('register-foreign');
    expect(rig.said('piece-doubted')).toEqual([]);
    expect(rig.command(rig.moving('go-on'))).toMatchObject({ code: 'illegal-step' });
    rig.happens({ type: 'tick' });
    rig.driveTo(null);
    expect(rig.sent.slice(sent).filter((line) => /^(G1|G28|G92)/.test(line))).toEqual([]);
    expect(rig.position).toEqual(FOREIGN);
  });

  it.each([
    ['fed a part', WHILE_FEEDING, (own: DrivenRig['position']) => own, 2],
    ['fed, and had not cut', WHILE_CUTTING, (own: DrivenRig['position']) => own, 2],
    ['cut, and had not counted', WHILE_CUTTING, (own: DrivenRig['position']) => ({ ...own, Z: 5.5 }), 3],
    ['counted', WHILE_CUTTING, () => ({ X: 0, Y: 170003, Z: 5.5, E: 0 }), 3],
  ])(
    'is put back to one that had %s: the count is right and the run ends whole',
    (_what, before, at, cut) => {
      const { rig, own } = swapped(before);
      meetAt(rig, at(own));
      expect([rig.run.cut, rig.run.hold, rig.run.doubt]).toEqual([cut, 'link-lost', null]);
      expect(rig.command(rig.moving('go-on'))?.outcome).toBe('done');
      rig.driveTo(/^G28/);
      rig.driveTo(null);
      expect(rig.said('piece-cut').map(({ piece }) => piece)).toEqual([1, 2, 3, 4]);
    },
  );

  it('is still known for the wrong one by an agent that was started again', () => {
    const { rig } = swapped(WHILE_CUTTING);
    const reborn = rig.reborn();
    reborn.meet();
    reborn.driveTo(null);
    expect(reborn.run.hold).toBe('register-foreign');
    expect(reborn.said('piece-doubted')).toEqual([]);
    meetAt(reborn, { X: 0, Y: 170003, Z: 5.5, E: 0 });
    expect([reborn.run.cut, reborn.run.doubt]).toEqual([3, null]);
  });

  it('lets a stop end the run where nothing is open, and a work hold begin', () => {
    const { rig } = swapped(WHILE_FEEDING);
    expect(rig.command({ kind: 'begin-work-hold', ...rig.envelope() })).toBeUndefined();
    rig.driveTo(null);
    const [answer] = rig.effects.filter((effect) => effect.do === 'answer').slice(-1);
    expect(answer).toMatchObject({ answer: { outcome: 'done' } });
    rig.command({ kind: 'stop', ...rig.envelope(), runId: RUN });
    rig.driveTo(null);
    meetAt(rig, FOREIGN);
    expect(rig.run.mode).toBe('ended');
  });

  it('whose board was reset meanwhile leaves the open piece in doubt, as law 3 has it', () => {
    const { rig } = swapped(WHILE_CUTTING);
    meetAt(rig, { X: 0, Y: 0, Z: 0, E: 0 });
    expect([rig.run.hold, rig.run.doubt]).toEqual(['doubt', 3]);
  });
});

// A work hold begun on a rig whose register was lost once waited for ever: the question after the standstill ended
// in a doubt, and nobody told the person that the rig stands still.
it('a work hold on a rig whose board was reset begins as soon as the rig stands still', () => {
  const rig = drivenRig({ pieces: 4, lengthMm: 200 });
  rig.start();
  rig.driveTo(/^G92 Y170002/);
  meetAt(rig, { X: 0, Y: 0, Z: 0, E: 0 });
  const command = { kind: 'begin-work-hold', ...rig.envelope() } as const;
  rig.command(command);
  rig.driveTo(null);
  expect(rig.answers.get(command.id)?.outcome).toBe('done');
});
