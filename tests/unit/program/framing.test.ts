import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { frameLine, xorChecksum } from '@/lib/program/framing';

describe('a framed line', () => {
  it('has a checksum that makes the XOR over all bytes before the star zero', () => {
    fc.assert(
      fc.property(fc.nat(99_999_999), fc.stringMatching(/^[A-Z][A-Z0-9 .-]{0,60}$/), (n, command) => {
        const [before = '', sum] = frameLine(n, command).split('*');
        expect(before).toBe(`N${n} ${command}`);
        expect(Array.from(before).reduce((all, letter) => all ^ letter.charCodeAt(0), Number(sum))).toBe(0);
      }),
    );
  });

  it('is never longer than the 95 characters a firmware takes', () => {
    // N1 and a blank, the command, a star and the sum.
    const longest = 'A'.repeat(95 - 'N1 '.length - '*26'.length);
    expect(frameLine(1, longest).length).toBeLessThanOrEqual(95);
    expect(() => frameLine(1, `${longest}AA`)).toThrow(RangeError);
  });

  it.each(['', '   ', 'G28 Z\nM112', 'G28 Z\r', 'M105*38', 'G90 ; absolute'])(
    'refuses %j, which a firmware would read as something else',
    (command) => expect(() => frameLine(1, command)).toThrow(RangeError),
  );

  it.each([-1, 1.5, Number.NaN])('refuses %d as its number', (n) =>
    expect(() => frameLine(n, 'M105')).toThrow(RangeError),
  );

  it('sums bytes, not characters, of a text for a display', () => {
    // é is C3 A9 in UTF-8: C3 xor A9 is 6A.
    expect(xorChecksum('é')).toBe(0x6a);
  });
});
