import { describe, expect, it } from 'vitest';
import { WireInHand as Wire } from './wire-in-hand';

const LINE = 'N28 G1 Z0 F600*8\n';

describe('one line in flight', () => {
  it('is written once and over with its ok', () => {
    const wire = new Wire().hear('ok');
    expect(wire.written).toEqual([LINE]);
    expect(wire.end).toEqual({ outcome: 'ok' });
  });

  it('takes no ok of another line', () => {
    expect(new Wire().hear('ok N27 P15 B3').end).toBeUndefined();
    expect(new Wire().hear('ok N28 P15 B3').end).toEqual({ outcome: 'ok' });
  });

  it('takes no ok without the answer that it asked for', () => {
    const wire = new Wire({ command: 'M114', needs: 'position' }).hear('ok');
    expect(wire.end).toBeUndefined();
    wire.hear('X:0.00 Y:17.00 Z:0.00 E:25.00 Count X:0 Y:0 Z:0', 'ok');
    expect(wire.end).toEqual({ outcome: 'ok' });
  });

  it('is written again once after a quiet, however often the firmware asks, and the ok after Resend acknowledges nothing', () => {
    const error = ['Error:checksum mismatch, Last Line: 27', 'Resend: 28', 'ok'];
    const wire = new Wire().hear(...error);
    wire.wait(50).hear(...error);
    wire.wait(50).hear(...error);
    expect(wire.written).toHaveLength(1);
    wire.wait(74);
    expect(wire.written).toHaveLength(1);
    wire.wait(1);
    expect(wire.written).toEqual([LINE, LINE]);
    expect(wire.end).toBeUndefined();
    expect(wire.hear('ok').end).toEqual({ outcome: 'ok' });
  });

  it('goes forward when the firmware asks for the next line: it was taken and its ok was lost', () => {
    const wire = new Wire().wait(4_000).wait(100);
    expect(wire.written).toEqual([LINE, '\n', LINE]);
    wire.hear('Error:Line Number is not Last Line Number+1, Last Line: 28', 'Resend: 29', 'ok').wait(75);
    expect(wire.end).toEqual({ outcome: 'taken' });
    expect(wire.written).toHaveLength(3);
  });

  it('is given up after a bounded number of resends', () => {
    const wire = new Wire();
    for (let round = 0; round < 7; round += 1) wire.hear('Resend: 28', 'ok').wait(75);
    expect(wire.end).toEqual({ outcome: 'failed', failure: 'out-of-step' });
    expect(wire.written).toHaveLength(7);
  });

  it('waits as long as its motion may last, then a newline, 100 ms, the same line, three times', () => {
    const wire = new Wire({ expectedMs: 60_000 }).wait(62_999);
    expect(wire.written).toHaveLength(1);
    wire.wait(1);
    expect(wire.written).toEqual([LINE, '\n']);
    wire.wait(99);
    expect(wire.written).toHaveLength(2);
    wire.wait(1);
    expect(wire.written).toEqual([LINE, '\n', LINE]);
    wire.wait(3 * 63_100);
    expect(wire.end).toEqual({ outcome: 'failed', failure: 'silent' });
    expect(wire.written.filter((text) => text === LINE)).toHaveLength(4);
  });

  it('is silent 5 s after the last busy, once a busy was seen', () => {
    const wire = new Wire({ expectedMs: 60_000 }).wait(2_000).hear('echo:busy: processing').wait(4_999);
    expect(wire.written).toHaveLength(1);
    expect(wire.wait(1).written).toEqual([LINE, '\n']);
    const known = new Wire({ expectedMs: 60_000, keepaliveSeen: true }).wait(5_000);
    expect(known.written).toEqual([LINE, '\n']);
  });

  it('fails at once when the board began anew or is dead', () => {
    expect(new Wire().hear('start').end).toEqual({ outcome: 'failed', failure: 'reset' });
    expect(new Wire().hear('Resend: 1').end).toEqual({ outcome: 'failed', failure: 'reset' });
    expect(new Wire().hear('Error:Printer halted. kill() called!').end).toEqual({
      outcome: 'failed',
      failure: 'halted',
    });
  });

  it('asks line 1 for line 1 again: that is no reset', () => {
    const wire = new Wire({ line: 1 }).hear('Resend: 1', 'ok').wait(75);
    expect(wire.end).toBeUndefined();
    expect(wire.written).toHaveLength(2);
  });
});
