import { describe, expect, it } from 'vitest';
import { RigAtHand } from './rig-at-hand';

/** Numbers and checks a line by hand: XOR over all bytes before the star. */
function framed(number: number, command: string): string {
  const text = `N${number} ${command}`;
  return `${text}*${[...Buffer.from(text)].reduce((sum, byte) => sum ^ byte, 0)}`;
}

function repetier(): RigAtHand {
  return new RigAtHand({ firmware: { family: 'repetier' } });
}

describe('a virtual rig of the family Repetier', () => {
  it('acknowledges a line with its number when it has it, and answers afterwards', () => {
    const rig = repetier();
    rig.run('N0 M110 N0*125');
    expect(rig.put('N1 M105*38\n')).toEqual(['ok 1', 'T:20.00 /0.00 @:0']);
    rig.run(framed(2, 'G4 P500'));
    expect(rig.put(`${framed(3, 'M114')}\n`)).toEqual(['ok 3']);
    rig.pass(500);
    expect(rig.sent.at(-1)).toBe('X:0.00 Y:0.00 Z:0.00 E:0.00');
  });

  it('asks for a damaged line, skips what comes behind it, and skips what it has seen', () => {
    const rig = repetier();
    rig.run(framed(1, 'G90'));
    expect(rig.put('N2 G90*99\n')).toEqual(['Error:Wrong checksum', 'Resend:2', 'ok']);
    expect(rig.put(`${framed(3, 'G90')}\n`)).toEqual(['skip 3', 'ok']);
    expect(rig.put(`${framed(2, 'G90')}\n`)).toEqual(['ok 2']);
    expect(rig.put(`${framed(2, 'G90')}\n`)).toEqual(['skip 2', 'ok']);
    expect(rig.put(`${framed(9, 'G90')}\n`)).toEqual(['Error:expected line 3 got 9', 'Resend:3', 'ok']);
  });

  it('counts lines modulo 65536', () => {
    const rig = repetier();
    rig.run(framed(65_535, 'M110 N65535'));
    expect(rig.put(`${framed(0, 'G90')}\n`)).toEqual(['ok 0']);
    expect(rig.put(`${framed(1, 'G90')}\n`)).toEqual(['ok 1']);
  });

  it('says wait every second while it is idle, and busy without echo while it is not', () => {
    const rig = repetier();
    rig.put('G90\n');
    rig.sent.length = 0;
    rig.pass(2_000);
    expect(rig.sent).toEqual(['wait', 'wait']);
    rig.put('G4 P4500\n');
    rig.sent.length = 0;
    rig.pass(4_400);
    expect(rig.sent).toEqual(['busy:processing', 'busy:processing']);
  });

  it.each([
    ['M302 S0', 160, false],
    ['M302 S1', 160, true],
    ['M302 P1', 160, true],
    ['M302 P1', 161, false],
  ])('after %s a feed of %d units is carried out: %s', (allow, units, feeds) => {
    const rig = repetier();
    rig.runAll(allow, `G1 E${units} F6000`);
    rig.pass(10_000);
    expect(rig.core.mechanics.wire.pastJawsMm > 0).toBe(feeds);
  });

  it('stops with fatal, moves nothing, and is revived by M999', () => {
    const rig = repetier();
    rig.core.firmware.stopOnError();
    expect(rig.sent.at(-1)).toMatch(/^fatal:/);
    rig.run('G1 X5 F6000');
    expect(rig.core.firmware.stepper.idle).toBe(true);
    rig.runAll('M999', 'G1 X5 F6000');
    expect(rig.core.firmware.stepper.idle).toBe(false);
  });

  it('tells its switches on one line, and no position when it is given one', () => {
    const rig = repetier();
    expect(rig.put('M119\n').at(-1)).toBe('endstops hit: x_min:H y_min:H z_min:H x_max:H ');
    expect(rig.put('G92 Y170001 E0\n').at(-1)).toContain('Y_OFFSET:170001.000');
    expect(rig.put('M114\n').at(-1)).toBe('X:0.00 Y:170001.00 Z:0.00 E:0.00');
    expect(rig.put('M211 S0\n').at(-1)).toContain('Unknown command');
  });
});
