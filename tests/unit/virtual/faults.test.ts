import { describe, expect, it } from 'vitest';
import { controlRequestSchema } from '@/agent/virtual/core/control-requests';
import { control } from '@/agent/virtual/core/controls';
import { snapshotOf } from '@/agent/virtual/core/snapshot';
import { RigAtHand, preparedRig } from './rig-at-hand';

describe('a bad line', () => {
  it('towards the rig makes it ask again, and never act', () => {
    const rig = new RigAtHand({ seed: 3 });
    control(rig.core, { do: 'noise', kind: 'flip', direction: 'in', bytes: 1, probability: 1 });
    const answers = rig.put('N1 M105*38\n');
    expect(answers[0]).not.toMatch(/^ok T/);
    expect(rig.put('N1 M105*38\n')).toEqual(['ok T:20.00 /0.00 @:0']);
  });

  it.each([
    ['drop', ''],
    ['double', 'ookk\n\n'],
  ] as const)('towards the sender can %s bytes', (kind, expected) => {
    const rig = new RigAtHand();
    control(rig.core, { do: 'noise', kind, direction: 'out', bytes: 3, probability: 1 });
    expect(rig.put('G90\n')).toEqual(expected.split('\n').slice(0, -1));
  });

  it('can flip one bit of two letters, which the checksum does not notice: the line is taken and not carried out', () => {
    const rig = new RigAtHand({ seed: 3 });
    control(rig.core, { do: 'noise', kind: 'pair', direction: 'in', bytes: 1, probability: 1 });
    rig.put('N1 M400*38\n');
    const answers = rig.put('N2 G1 Z0 F600*48\n');
    expect(answers[0]).toMatch(/^echo:Unknown command: "[^G]1 Z0 [^F]600"$/);
    expect(answers[1]).toBe('ok');
  });

  it('disturbs no more bytes than it was told', () => {
    const rig = new RigAtHand();
    control(rig.core, { do: 'noise', kind: 'drop', direction: 'out', bytes: 3, probability: 1 });
    rig.put('G90\n');
    expect(rig.put('G90\n')).toEqual(['ok']);
  });
});

describe('an answer', () => {
  it('can be swallowed once, while the command is carried out', () => {
    const rig = new RigAtHand();
    control(rig.core, { do: 'ok', fault: 'swallow', count: 1 });
    expect(rig.put('G92 X5\n')).toEqual(['X:5.00 Y:0.00 Z:0.00 E:0.00 Count X:0 Y:0 Z:0']);
    expect(rig.run('G90')).toEqual(['ok']);
  });

  it('can come twice', () => {
    const rig = new RigAtHand();
    control(rig.core, { do: 'ok', fault: 'double', count: 1 });
    expect(rig.put('G90\n')).toEqual(['ok', 'ok']);
  });

  it('can come in two halves, and nothing overtakes the second', () => {
    const rig = new RigAtHand();
    control(rig.core, { do: 'ok', fault: 'split', count: 1 });
    expect(rig.put('G90\nM105\n')).toEqual([]);
    rig.pass(59);
    expect(rig.sent).toEqual([]);
    rig.pass(1);
    expect(rig.sent).toEqual(['ok', 'ok T:20.00 /0.00 @:0']);
  });

  it('is lost while the rig is mute, and the work is done', () => {
    const rig = new RigAtHand();
    control(rig.core, { do: 'mute', ms: 5000 });
    expect(rig.put('G92 Y7\n')).toEqual([]);
    rig.pass(5000);
    expect(rig.run('M114')[0]).toContain('Y:7.00');
  });

  it('is busy while the rig is, and the work is done afterwards', () => {
    const rig = new RigAtHand();
    control(rig.core, { do: 'busy', ms: 5000 });
    rig.put('G92 Y7\n');
    rig.pass(4999);
    expect(rig.sent).toEqual(['echo:busy: processing', 'echo:busy: processing']);
    rig.pass(1);
    expect(rig.sent.at(-1)).toBe('ok');
  });
});

describe('power', () => {
  it('lost and back forgets everything the board was told', () => {
    const rig = preparedRig();
    rig.runAll('G92 Y420001', 'G1 Z-3.5 F1200', 'M400', 'M117 4711');
    control(rig.core, { do: 'power', on: false });
    expect(rig.put('M105\n')).toEqual([]);
    expect(rig.core.mechanics.positionMm.Z).toBe(-1);
    control(rig.core, { do: 'power', on: true });
    rig.pass(1000);
    expect(rig.sent).toContain('start');
    expect(rig.run('M114')[0]).toMatch(/^X:0\.00 Y:0\.00 Z:0\.00/);
    expect(rig.run('M302')[0]).toContain('disabled');
    expect(snapshotOf(rig.core).display).toBe('');
  });

  it('of the motors off is told by nothing that the firmware says', () => {
    const rig = preparedRig();
    rig.runAll('G92 Y420000 E0', 'G1 E50 F3000', 'M400');
    control(rig.core, { do: 'motor-power', on: false });
    rig.runAll('G1 Z-4 F1200', 'M400');
    expect(rig.run('M114')[0]).toBe('X:0.00 Y:420000.00 Z:-4.00 E:50.00 Count X:0 Y:0 Z:-400');
    expect(rig.tallied('closing')).toEqual([]);
  });
});

describe('hands', () => {
  it('move an axis that the firmware knows nothing of, jaws included', () => {
    const rig = new RigAtHand();
    rig.runAll('M302 P1', 'G1 E30 F3000', 'M400');
    expect(control(rig.core, { do: 'hand-move', axis: 'Z', mm: -4 })).toEqual({ atMm: -4 });
    expect(rig.run('M114')[0]).toContain('Z:0.00');
    expect(rig.tallied('closing').map((closing) => closing.severed)).toEqual([true]);
  });
});

describe('the control requests', () => {
  it.each([
    { do: 'explode' },
    { do: 'guard' },
    { do: 'guard', open: true, quietly: true },
    { do: 'mute', ms: -1 },
  ])('refuse %j', (request) => {
    expect(controlRequestSchema.safeParse(request).success).toBe(false);
  });

  it('answer the whole state', () => {
    const rig = preparedRig();
    rig.run('M117 4711');
    expect(control(rig.core, { do: 'snapshot' })).toMatchObject({
      snapshot: {
        board: 'running',
        display: '4711',
        portOpen: true,
        commandedMm: { Z: -1 },
        guardOpen: false,
        jawsShut: false,
        counts: { closings: 0 },
      },
    });
  });
});
