import { describe, expect, it } from 'vitest';
import { PERSON, RUN, bareProfile, drivenRig, type DrivenRig } from './driven-rig';

const ORDER = { pieces: 4, lengthMm: 200 };

/** Lines of the program that were sent, without the agent's own questions. */
function motion(rig: DrivenRig): string[] {
  return rig.sent.filter((line) => /^G[01]\b|^G28/.test(line));
}

function stands(rig: DrivenRig): void {
  const before = motion(rig).length;
  rig.driveTo(null);
  for (let second = 0; second < 5; second += 1) {
    rig.nowMs += 1_000;
    rig.happens({ type: 'tick' });
    rig.driveTo(null);
  }
  expect(motion(rig)).toHaveLength(before);
}

describe('a run', () => {
  it('homes, trims, writes the register, cuts every piece and parks, in the program’s order', () => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(null);
    expect(rig.run.mode).toBe('ended');
    expect(rig.said('piece-cut').map(({ piece }) => piece)).toEqual([1, 2, 3, 4]);
    expect(rig.said('run-ended')).toMatchObject([{ outcome: 'complete', pieces: 4 }]);
    const program = rig.held.given.program.split('\n').filter((line) => line !== '' && !line.startsWith(';'));
    // Once more M400 and M114 before and after: where it stands, and that it stands.
    expect(rig.sent.filter((line) => line !== 'M400' && line !== 'M114')).toEqual(
      program.filter((line) => line !== 'M400' && line !== 'M114'),
    );
  });

  it('counts a piece only when the answer shows its number in the register', () => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G92 Y170001/);
    expect(rig.said('piece-cut')).toEqual([]);
    rig.happens({ type: 'answered', sure: true, replies: [] });
    expect(rig.said('piece-cut')).toEqual([]);
    expect(rig.sent.at(-1)).toBe('G92 Y170001 E0');
    rig.answer();
    expect(rig.said('piece-cut')).toHaveLength(1);
  });

  it('has the cut on disk before its line goes out, and nothing of the kind for a feed or a trim', () => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G92 Y170000/);
    expect(
      rig.entries.filter((entry) => entry.type === 'note' && entry.note.note === 'cut-commanded'),
    ).toEqual([]);
    rig.driveTo(/^G1 Z5\.5/);
    const last = rig.effects.slice(-2);
    expect(last[0]).toMatchObject({ do: 'note', note: { note: 'cut-commanded', piece: 1 } });
    expect(last[1]).toMatchObject({ do: 'send', command: 'G1 Z5.5 F1500' });
  });

  it('takes no M400 for done whose ok was lost', () => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G1 Z5\.5/);
    rig.answer();
    expect(rig.sent.at(-1)).toBe('M400');
    const before = rig.sent.length;
    rig.answer(false);
    expect(rig.sent.slice(before)).toEqual(['M400']);
  });

  it.each([
    'echo: cold extrusion prevented',
    'echo: too long extrusion prevented',
    'echo:Unknown command: "C1 Z0"',
  ])('is held before the register is written when the firmware says %s', (text) => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G92 Y170001/);
    rig.driveTo(/^G1 E100/);
    rig.saying = { to: /^G1 E100/, lines: [text] };
    rig.driveTo(null);
    expect(rig.run.hold).toBe('firmware-refused');
    expect(rig.said('misfeed')).toMatchObject([{ piece: 2, foundBy: 'rig' }]);
    expect(rig.said('piece-cut')).toHaveLength(1);
    stands(rig);
    rig.command(rig.moving('go-on'));
    rig.driveTo(null);
    expect(rig.said('trim-cut')).toHaveLength(2);
    expect(rig.said('piece-cut').map(({ piece }) => piece)).toEqual([1, 2, 3, 4]);
  });

  it.each([
    ['the feed', { E: 199.9 }],
    ['the cut axis', { Z: 5.6 }],
  ])('is held when %s is not where it must be', (_name, wrong) => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G92 Y170001/);
    rig.driveTo(/^G1 Z5\.5/);
    rig.answer();
    rig.answer();
    Object.assign(rig.position, wrong);
    rig.driveTo(null);
    expect(rig.run.hold).toBe('position-wrong');
    expect(rig.said('piece-cut')).toHaveLength(1);
  });

  it('writes the count that it has into the register after a new homing', () => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G92 Y170002/);
    rig.command({ kind: 'hold', ...rig.envelope(), runId: RUN, cause: 'slipped' });
    rig.driveTo(null);
    const before = rig.sent.length;
    rig.command(rig.moving('go-on'));
    rig.driveTo(null);
    const registers = rig.sent.slice(before).filter((line) => line.startsWith('G92 Y'));
    expect(registers).toEqual(['G92 Y170002 E0', 'G92 Y170003 E0', 'G92 Y170004 E0']);
  });
});

describe('a person', () => {
  it('measures the first pieces, and as many again when one was wrong', () => {
    const rig = drivenRig({ pieces: 9, lengthMm: 40, firstPieces: 3 });
    rig.start();
    rig.driveTo(null);
    expect([rig.run.hold, rig.run.cut]).toEqual(['first-pieces', 3]);
    rig.command(rig.moving('go-on', true));
    rig.driveTo(null);
    expect([rig.run.hold, rig.run.cut]).toEqual(['first-pieces', 6]);
    rig.command(rig.moving('go-on'));
    rig.driveTo(null);
    expect(rig.run.mode).toBe('ended');
  });

  it('pauses at the end of the piece with the jaws open', () => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G1 E100/);
    rig.command({ kind: 'pause', ...rig.envelope(), runId: RUN });
    rig.driveTo(null);
    expect(rig.run.mode).toBe('paused');
    expect(rig.position).toMatchObject({ Z: 8, E: 0, Y: 170001 });
    expect(rig.said('run-paused')).toMatchObject([{ personId: PERSON }]);
    stands(rig);
  });

  it('finds the steppers let go after the profile’s time, and the rig homes before it moves on', () => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G1 E100/);
    rig.command({ kind: 'pause', ...rig.envelope(), runId: RUN });
    rig.driveTo(null);
    rig.nowMs += 119_000;
    rig.happens({ type: 'tick' });
    expect(rig.sent.at(-1)).not.toBe('M84');
    rig.nowMs += 2_000;
    rig.happens({ type: 'tick' });
    expect(rig.sent.at(-1)).toBe('M84');
    rig.driveTo(null);
    expect(rig.run.hold).toBe('steppers-released');
    rig.command(rig.moving('go-on'));
    rig.driveTo(/^G28 Z/);
    rig.driveTo(null);
    expect(rig.said('trim-cut')).toHaveLength(2);
    expect(rig.said('piece-cut')).toHaveLength(4);
  });

  it.each([/^G28/, /^G1 E12/, /^G1 E100/, /^G1 Z5\.5/, /^M400/, /^G92 Y170001/])(
    'stops while %s is in flight: not one more line that moves',
    (line) => {
      const rig = drivenRig(ORDER);
      rig.start();
      rig.driveTo(line);
      rig.command({ kind: 'stop', ...rig.envelope(), runId: RUN });
      stands(rig);
      expect(rig.run.mode).toBe('ended');
      expect(rig.said('run-ended')).toMatchObject([
        { outcome: 'stopped', pieces: rig.said('piece-cut').length },
      ]);
    },
  );

  it('is told of the standstill before a work hold is answered, and nothing moves until they end it', () => {
    const rig = drivenRig(ORDER);
    rig.start();
    rig.driveTo(/^G1 Z5\.5/);
    const begin = { kind: 'begin-work-hold', ...rig.envelope() } as const;
    expect(rig.command(begin)).toBeUndefined();
    rig.answer();
    expect(rig.sent.at(-1)).toBe('M400');
    expect(rig.answers.get(begin.id)).toBeUndefined();
    rig.driveTo(null);
    expect(rig.answers.get(begin.id)?.outcome).toBe('done');
    stands(rig);
    expect(rig.command(rig.moving('go-on'))).toMatchObject({ code: 'work-hold' });
    rig.command({ kind: 'end-work-hold', ...rig.envelope() });
    expect(rig.command(rig.moving('go-on'))?.outcome).toBe('done');
    rig.driveTo(null);
    expect(rig.said('trim-cut')).toHaveLength(2);
  });
});

describe('a fault in mid-run', () => {
  const guarded = {
    ...bareProfile,
    fitted: { ...bareProfile.fitted, guardSwitch: { endstop: 'x_max', closedReads: 'TRIGGERED' as const } },
  };

  it('that opens the guard sends M112 where that acts at once and the guard cuts no supply', () => {
    const rig = drivenRig(ORDER, guarded);
    rig.meet();
    rig.saying = { to: /^M119/, lines: ['x_max: TRIGGERED'] };
    rig.nowMs += 1_000;
    rig.happens({ type: 'tick' });
    rig.driveTo(null);
    rig.command({ kind: 'take-program', ...rig.envelope(), runId: RUN });
    rig.command(rig.moving('start-run'));
    rig.driveTo(/^G1 E100/);
    rig.nowMs += 1_000;
    rig.driveTo(/^M119/);
    rig.saying = { to: /^M119/, lines: ['x_max: open'] };
    rig.answer();
    expect(rig.interrupts).toEqual(['M112']);
    expect(rig.run.hold).toBe('guard-open');
    expect(rig.state.outstanding).toBeNull();
  });
});
