import { describe, expect, it } from 'vitest';
import { RigAtHand } from './rig-at-hand';

/** Numbers and checks a line by hand: XOR over all bytes before the star. */
function framed(number: number, command: string): string {
  const text = `N${number} ${command}`;
  return `${text}*${[...Buffer.from(text)].reduce((sum, byte) => sum ^ byte, 0)}`;
}

describe('numbered lines', () => {
  it('with the published checksums are taken in their order', () => {
    const rig = new RigAtHand();
    expect(rig.run('N0 M110 N0*125')).toEqual(['ok']);
    expect(rig.run('N1 M105*38')).toEqual(['ok T:20.00 /0.00 @:0']);
    expect(rig.run('N0 M110 N0*125')).toEqual(['ok']);
    expect(rig.run('N1 M115*39').at(-1)).toBe('ok');
    rig.run(framed(2, 'M110 N2'));
    rig.run('N3 T0*57');
    expect(rig.run('N4 G92 E0*67').at(-1)).toBe('ok');
    expect(rig.run('N5 G28*22').at(-1)).toBe('ok');
    expect(rig.run('N6 G1 F1500.0*82')).toEqual(['ok']);
    expect(rig.run('N7 G1 X2.0 Y2.0 F3000.0*85')).toEqual(['ok']);
    expect(rig.run('N8 G1 X3.0 Y3.0*33')).toEqual(['ok']);
  });

  it('with a wrong checksum are asked for again, with an ok that acknowledges nothing', () => {
    const rig = new RigAtHand();
    expect(rig.put('N1 G4 P0*99\n')).toEqual(['Error:checksum mismatch, Last Line: 0', 'Resend: 1', 'ok']);
  });

  it('without a checksum are asked for again', () => {
    const rig = new RigAtHand();
    rig.run(framed(1, 'G90'));
    expect(rig.put('N2 G90\n')).toEqual([
      'Error:No Checksum with line number, Last Line: 1',
      'Resend: 2',
      'ok',
    ]);
  });

  it('are refused by number when they come twice, and are carried out once', () => {
    const rig = new RigAtHand();
    rig.runAll(framed(1, 'G91'), framed(2, 'G1 X1 F6000'));
    expect(rig.put(`${framed(2, 'G1 X1 F6000')}\n`)).toEqual([
      'Error:Line Number is not Last Line Number+1, Last Line: 2',
      'Resend: 3',
      'ok',
    ]);
    expect(rig.run('M114')[0]).toMatch(/^X:1\.00 /);
  });

  it('written at once, the first of them broken, give one error', () => {
    const rig = new RigAtHand();
    const answers = rig.put(`N1 G90*1\n${framed(2, 'G90')}\n${framed(3, 'G90')}\n`);
    expect(answers.filter((line) => line.startsWith('Error'))).toHaveLength(1);
  });

  it('written one after another, the first of them broken, give an error each', () => {
    const rig = new RigAtHand();
    const answers = ['N1 G90*1', framed(2, 'G90'), framed(3, 'G90')].flatMap((line) => rig.put(`${line}\n`));
    expect(answers.filter((line) => line === 'Resend: 1')).toHaveLength(3);
  });

  // Seen on real firmware: the XOR does not notice two flips of one bit.
  it('with two flips of one bit are taken, and one cut is lost', () => {
    const rig = new RigAtHand();
    rig.run(framed(23, 'M110 N23'));
    expect(rig.run('N24 C1 Z0 B600*4')).toEqual(['echo:Unknown command: "C1 Z0 B600"', 'ok']);
  });
});

describe('the line itself', () => {
  it('gets no ok when it is empty or a comment', () => {
    const rig = new RigAtHand();
    expect(rig.put('\n\r\n;@ home\n')).toEqual([]);
  });

  it('gets an answer when it holds blanks only', () => {
    const rig = new RigAtHand();
    expect(rig.run('   ')).toEqual(['echo:Unknown command: ""', 'ok']);
  });

  it('loses a comment behind a command', () => {
    const rig = new RigAtHand();
    expect(rig.run('M117 hold ; not shown')).toEqual(['ok']);
    expect(rig.displayed.at(-1)).toBe('hold');
  });

  it('of 95 characters is taken, of 96 is cut and asked for again for ever', () => {
    const ofLength = (length: number) =>
      Array.from({ length: 95 }, (_, letters) => framed(1, `M117 ${'x'.repeat(letters)}`)).find(
        (line) => line.length === length,
      ) ?? '';
    expect(ofLength(95)).toHaveLength(95);
    expect(ofLength(96)).toHaveLength(96);
    const rig = new RigAtHand();
    const first = () => rig.put(`${ofLength(96)}\n`)[0];
    expect(first()).toBe('Error:checksum mismatch, Last Line: 0');
    expect(first()).toBe('Error:checksum mismatch, Last Line: 0');
    expect(rig.put(`${ofLength(95)}\n`)).toEqual(['ok']);
  });

  it('may come in any pieces', () => {
    const rig = new RigAtHand();
    expect(['N', '1 M', '105*', '38'].flatMap((part) => rig.put(part))).toEqual([]);
    expect(rig.put('\n')).toEqual(['ok T:20.00 /0.00 @:0']);
  });

  it('is eaten while the board boots', () => {
    const rig = new RigAtHand();
    rig.core.firmware.reset('button');
    expect(rig.put('M105\n')).toEqual([]);
    rig.pass(1000);
    expect(rig.sent).toContain('start');
    expect(rig.sent).not.toContain('ok T:20.00 /0.00 @:0');
  });
});

describe('the buffers', () => {
  it('drop bytes when four lines and 128 bytes wait', () => {
    const rig = new RigAtHand();
    const line = 'G4 P1 ;23456789\n';
    rig.put('G4 P60000\n');
    for (let sent = 0; sent < 30; sent += 1) rig.put(line);
    rig.pass(120_000);
    // One under way, three behind it, and 128 / 16 = 8 in the receive buffer.
    expect(rig.sent.filter((answer) => answer === 'ok')).toHaveLength(1 + 3 + 8);
  });

  it('accept moves long before they have ended: ok is not done', () => {
    const rig = new RigAtHand();
    for (let x = 1; x <= 15; x += 1) expect(rig.put(`G1 X${x * 10} F3000\n`)).toEqual(['ok']);
    expect(rig.put('G1 X160\n')).toEqual([]);
    expect(rig.core.firmware.stepper.idle).toBe(false);
    rig.pass(300);
    expect(rig.sent.at(-1)).toBe('ok');
    expect(rig.run('M114')[0]).toMatch(/^X:160\.00 .* Count X:\d{1,4} /);
  });

  it('tell the place of each line when the build says so', () => {
    const rig = new RigAtHand({ firmware: { advancedOk: true } });
    expect(rig.run('N1 M105*38')).toEqual(['ok T:20.00 /0.00 @:0']);
    expect(rig.run(framed(2, 'G90'))).toEqual(['ok N2 P15 B3']);
  });

  it.each([
    [1, 2000],
    [20, 40_000],
  ])('say busy every 2 s of the wall clock at speed %d', (speed, everyMs) => {
    const rig = new RigAtHand({ speed });
    rig.put(`G4 P${everyMs * 3 + 1}\n`);
    rig.pass(everyMs - 1);
    expect(rig.sent).toEqual([]);
    rig.pass(1);
    expect(rig.sent).toEqual(['echo:busy: processing']);
    rig.pass(everyMs * 2 + 1);
    expect(rig.sent).toEqual([...Array<string>(3).fill('echo:busy: processing'), 'ok']);
  });
});
