import { describe, expect, it } from 'vitest';
import { whereStands } from '@/agent/runner/standing';
import type { PositionReport } from '@/agent/dialect/position';
import { bareProfile, drivenRig, RIG, RUN, type DrivenRig } from './driven-rig';

const ORDER = { pieces: 4, lengthMm: 200 };

/** A run in its third piece whose cut was commanded. */
function inThirdPiece(): DrivenRig {
  const rig = drivenRig(ORDER);
  rig.start();
  rig.driveTo(/^G92 Y170002/);
  rig.driveTo(/^G1 Z5\.5/);
  return rig;
}

function at(Y: number, E: number, Z: number): PositionReport {
  return { X: 0, Y, Z, E, count: { X: 0, Y: 0, Z: Math.round(Z * 100) } };
}

describe('law 2: where a run stands, by register, feed and cut axis', () => {
  const { run } = inThirdPiece();
  // The table of design.md 5, with n = 2.
  it.each([
    ['(n, 0, cut) is counted: the jaws open', at(170002, 0, 5.5), { counted: 2, line: 'G1 Z8 F1500' }],
    ['(n, 0, standby) has nothing fed', at(170002, 0, 8), { counted: 2, line: 'G1 E100 F3600' }],
    ['(n, part, standby) is fed on', at(170002, 100, 8), { counted: 2, line: 'G1 E200 F3600' }],
    [
      '(n, part of a move, standby) is fed on to the same end',
      at(170002, 31.4, 8),
      { counted: 2, line: 'G1 E100 F3600' },
    ],
    ['(n, length, standby) is cut', at(170002, 200, 8), { counted: 2, line: 'G1 Z5.5 F1500' }],
    ['(n + 1, 0, cut) was counted by the rig', at(170003, 0, 5.5), { counted: 3, line: 'G1 Z8 F1500' }],
    ['(n + 1, 0, standby) was counted by the rig', at(170003, 0, 8), { counted: 3, line: 'G1 E100 F3600' }],
  ])('%s', (_name, position, { counted, line }) => {
    const standing = whereStands(run, bareProfile, position);
    if (standing.is !== 'resume') throw new Error(standing.is);
    expect(standing.counted).toBe(counted);
    expect(run.program.pieces[standing.cursor.piece - 1]?.[standing.cursor.index]?.line).toBe(line);
  });

  it('(n, length, cut) is written into the register', () => {
    expect(whereStands(run, bareProfile, at(170002, 200, 5.5))).toEqual({ is: 'open', piece: 3 });
  });

  it.each([
    ['a lost register', at(0, 0, 0), 'lost'],
    ['another run’s tag', at(180002, 0, 8), 'foreign'],
    ['a register that is written by hand', at(17, 0, 8), 'foreign'],
    ['more pieces than the journal has', at(170004, 0, 8), 'ahead'],
    ['fewer pieces than the journal has', at(170001, 0, 8), 'ahead'],
    ['jaws shut on half a piece', at(170002, 100, 5.5), 'nowhere'],
    ['jaws half shut', at(170002, 200, 6.5), 'nowhere'],
    ['more fed than a piece', at(170002, 201, 8), 'nowhere'],
    [
      'a cut axis whose steps say otherwise',
      { ...at(170002, 200, 5.5), count: { X: 0, Y: 0, Z: 560 } },
      'nowhere',
    ],
  ])('%s is said', (_name, position, is) => {
    expect(whereStands(run, bareProfile, position).is).toBe(is);
  });

  it('after the last piece only opening and parking are left', () => {
    const complete = { ...run, cut: 4, openCut: null };
    for (const Z of [8, 12]) {
      expect(whereStands(complete, bareProfile, at(170004, 0, Z))).toMatchObject({
        cursor: { part: 'end', index: 0 },
      });
    }
    expect(whereStands(complete, bareProfile, at(170004, 0, 5.5))).toMatchObject({
      cursor: { part: 'piece', piece: 4 },
    });
  });
});

/** What must be the same after a death, whatever else is asked anew. */
function essence(rig: DrivenRig) {
  const { run, fence, taken, workHold } = rig.state;
  return {
    fence,
    taken,
    workHold: workHold?.personId ?? null,
    run: run && {
      begun: run.mode !== 'holding',
      ended: run.mode === 'ended',
      cut: run.cut,
      openCut: run.openCut,
      doubt: run.doubt,
      registered: run.registered,
      standbyCount: run.registered ? run.standbyCount : null,
      mustHome: run.mustHome,
      measureAt: run.measureAt,
      stop: run.stop,
    },
  };
}

describe('an agent that died after any line at all', () => {
  it('knows by its journal what it knew, and ends with every piece cut and counted once', () => {
    const steps = (() => {
      const whole = drivenRig({ ...ORDER, firstPieces: 2 });
      whole.start();
      whole.driveTo(null);
      whole.command(whole.moving('go-on'));
      whole.driveTo(null);
      return whole.sent.length;
    })();
    for (let death = 1; death < steps; death += 1) {
      const rig = drivenRig({ ...ORDER, firstPieces: 2 });
      rig.start();
      for (let line = 1; line < death; line += 1) {
        if (rig.state.outstanding) rig.answer();
        else if (rig.run.mode === 'held') rig.command(rig.moving('go-on'));
      }
      const before = essence(rig);
      const reborn = rig.reborn();
      expect(essence(reborn)).toEqual(before);
      if (before.run?.ended) continue;
      const feedsBefore = reborn.position.E;
      reborn.meet();
      reborn.driveTo(null);
      // Nothing moved: registering is not motion.
      expect(reborn.sent.filter((line) => /^G1|^G28/.test(line))).toEqual([]);
      expect([feedsBefore, 0]).toContain(reborn.position.E);
      for (let turns = 0; turns < 4 && reborn.run.mode !== 'ended'; turns += 1) {
        expect(reborn.command(reborn.moving('go-on'))).toMatchObject({ outcome: 'done' });
        reborn.driveTo(null);
      }
      expect(reborn.said('piece-cut').map(({ piece }) => piece)).toEqual([1, 2, 3, 4]);
      expect(reborn.said('piece-doubted')).toEqual([]);
      expect(reborn.said('run-ended')).toHaveLength(1);
    }
  });

  it('doubts exactly the piece whose cut was commanded when the rig was reset meanwhile', () => {
    const lines = ['G1 E100', 'G1 E200', 'G1 Z5.5', 'M400', 'M114', 'G92 Y170003', 'G1 Z8'];
    const doubts = lines.map((line) => {
      const rig = drivenRig(ORDER);
      rig.start();
      rig.driveTo(/^G92 Y170002/);
      rig.answer();
      rig.driveTo(/^G1 E100/);
      rig.driveTo(new RegExp(`^${line.replace('.', '\\.')}`));
      const reborn = rig.reborn();
      reborn.position = { X: 0, Y: 0, Z: 0, E: 0 };
      reborn.meet(true);
      reborn.driveTo(null);
      expect(reborn.run.hold).toBe(reborn.run.doubt === null ? 'firmware-reset' : 'doubt');
      return reborn.run.doubt;
    });
    expect(doubts).toEqual([null, null, 3, 3, 3, 3, null]);
  });

  it.each(['count', 'discard'] as const)(
    'lets a person %s the doubted piece, homes, trims and goes on',
    (answer) => {
      const rig = inThirdPiece().reborn();
      rig.position = { X: 0, Y: 0, Z: 0, E: 0 };
      rig.meet(true);
      rig.driveTo(null);
      expect(rig.command(rig.moving('go-on'))).toMatchObject({ code: 'doubt-open' });
      rig.command({ kind: 'settle-piece', ...rig.envelope(), runId: RUN, answer });
      expect(rig.command(rig.moving('go-on'))?.outcome).toBe('done');
      rig.driveTo(/^G28/);
      rig.driveTo(null);
      expect(rig.said('trim-cut')).toHaveLength(2);
      expect(rig.said('piece-cut').map(({ piece }) => piece)).toEqual(
        answer === 'count' ? [1, 2, 4] : [1, 2, 3, 4],
      );
      expect(rig.run.cut).toBe(4);
    },
  );

  it('does not go on with a register of another run', () => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G92 Y170001/);
    rig.driveTo(/^G1 E100/);
    const reborn = rig.reborn();
    reborn.position = { X: 0, Y: 180009, Z: 8, E: 0 };
    reborn.meet();
    reborn.driveTo(null);
    expect(reborn.run.hold).toBe('register-foreign');
  });

  it('keeps a work hold, a full tray and a stop that was asked for', () => {
    const rig = inThirdPiece();
    rig.command({ kind: 'begin-work-hold', ...rig.envelope() });
    rig.command({ kind: 'stop', ...rig.envelope(), runId: RUN });
    const reborn = rig.reborn();
    expect(reborn.state.workHold).not.toBeNull();
    expect(reborn.run.stop).not.toBeNull();
    reborn.meet();
    reborn.driveTo(null);
    expect(reborn.run.mode).toBe('ended');
    const again = reborn.reborn();
    expect(again.run.mode).toBe('ended');
    again.command({ kind: 'clear-tray', ...again.envelope(), runId: RUN });
    expect(again.reborn().state.run).toBeNull();
  });

  it('counts by a person where the rig has no spare axis', () => {
    const profile = { ...bareProfile, registerAxis: null };
    const rig = drivenRig(ORDER, profile);
    rig.start();
    rig.driveTo(/^G1 Z5\.5/);
    rig.answer();
    rig.driveTo(/^G1 Z5\.5/);
    const open = rig.reborn();
    open.meet();
    open.driveTo(null);
    expect(open.run.doubt).toBe(1);
    rig.driveTo(/^G1 Z8/);
    const closed = rig.reborn();
    closed.meet();
    closed.driveTo(null);
    expect([closed.run.doubt, closed.run.hold, closed.run.mustHome]).toEqual([null, 'agent-restarted', true]);
  });

  it('writes nothing of another rig', () => {
    const rig = inThirdPiece();
    const bodies = rig.entries.map((entry) => (entry.type === 'event' ? entry.event.body : entry.note));
    expect(bodies.every((body) => !('rigId' in body) || body.rigId === RIG)).toBe(true);
  });
});

describe('a lost link', () => {
  it('holds the run, asks the rig when it is back, and homes before anything moves', () => {
    const rig = inThirdPiece();
    rig.happens({ type: 'lost', failure: 'closed', reason: 'cable' });
    expect(rig.run.hold).toBe('link-lost');
    expect(rig.command(rig.moving('go-on'))).toMatchObject({ code: 'rig-not-connected' });
    rig.position = { ...rig.position, Z: 5.5, E: 200, Y: 170002 };
    rig.meet();
    expect(rig.sent.at(-1)).toBe('M400');
    rig.driveTo(null);
    expect(rig.said('piece-cut').map(({ piece }) => piece)).toEqual([1, 2, 3]);
    rig.command(rig.moving('go-on'));
    rig.driveTo(/^G28/);
  });

  it.each([
    ['reset', 'doubt'],
    ['halted', 'doubt'],
    ['silent', 'link-lost'],
    ['out-of-step', 'link-lost'],
  ] as const)('by %s with a commanded cut is held as %s', (failure, hold) => {
    const rig = inThirdPiece();
    rig.happens({ type: 'lost', failure, reason: '' });
    expect(rig.run.hold).toBe(hold);
    expect(rig.state.outstanding).toBeNull();
  });
});
