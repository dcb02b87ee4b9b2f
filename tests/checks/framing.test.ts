import { describe, expect, it } from 'vitest';
import { frameLine } from '@/lib/program/framing';

describe('published examples of numbered lines (protocol.md 1, from firmware documentation)', () => {
  it.each([
    [3, 'T0', 'N3 T0*57'],
    [4, 'G92 E0', 'N4 G92 E0*67'],
    [5, 'G28', 'N5 G28*22'],
    [6, 'G1 F1500.0', 'N6 G1 F1500.0*82'],
    [7, 'G1 X2.0 Y2.0 F3000.0', 'N7 G1 X2.0 Y2.0 F3000.0*85'],
    [8, 'G1 X3.0 Y3.0', 'N8 G1 X3.0 Y3.0*33'],
    [0, 'M110 N0', 'N0 M110 N0*125'],
    [1, 'M105', 'N1 M105*38'],
    [1, 'M115', 'N1 M115*39'],
  ])('line %d, %s', (lineNumber, command, framed) => expect(frameLine(lineNumber, command)).toBe(framed));

  it('two flips of one bit cancel, so a checksum is no proof (protocol.md 0.6, seen on real firmware)', () => {
    expect(frameLine(24, 'G1 Z0 F600')).toBe('N24 G1 Z0 F600*4');
    expect(frameLine(24, 'C1 Z0 B600')).toBe('N24 C1 Z0 B600*4');
  });
});
