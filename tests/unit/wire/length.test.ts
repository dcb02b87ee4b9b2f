import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseLengthMm, spokenMm } from '@/lib/wire/length';

describe('a length', () => {
  it.each([
    ['63.5', 63.5],
    ['63,5', 63.5],
    [' 63.5 mm ', 63.5],
    ['63,5MM', 63.5],
    ['2.5in', 63.5],
    ['2,5 in', 63.5],
    ['2.5"', 63.5],
    ['2.5″', 63.5],
    ['1 inch', 25.4],
    ['2.3 inches', 58.42],
    ['0.001', 0.001],
    ['120', 120],
  ])('%j is %d mm', (text, lengthMm) => expect(parseLengthMm(text)).toBe(lengthMm));

  it.each([
    '',
    '0',
    '0,0 in',
    '-5',
    '+5',
    '1.234,5',
    '1,234.5',
    '1 234',
    '5 cm',
    '5m',
    '.5',
    '5.',
    '1e3',
    'NaN',
    'mm',
    '2 ft',
  ])('%j is refused rather than guessed', (text) => expect(parseLengthMm(text)).toBeNull());

  it('is the same with a point and with a comma', () => {
    fc.assert(
      fc.property(fc.nat(99_999), fc.integer({ min: 1, max: 999 }), (whole, thousandths) => {
        const fraction = String(thousandths).padStart(3, '0');
        const pointed = parseLengthMm(`${whole}.${fraction}`);
        expect(pointed).toBeCloseTo(whole + thousandths / 1000, 6);
        expect(parseLengthMm(`${whole},${fraction}`)).toBe(pointed);
      }),
    );
  });

  it('in inches is 25.4 times as many mm', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 9_999_999 }), (thousandths) => {
        const inches = (thousandths / 1000).toFixed(3);
        expect(parseLengthMm(`${inches} in`)).toBe((thousandths * 254) / 10_000);
      }),
    );
  });

  it('is spoken in mm without needless decimals', () => {
    expect([63.5, 120, 58.4199999, 0.125].map(spokenMm)).toEqual([
      '63.5 mm',
      '120 mm',
      '58.42 mm',
      '0.13 mm',
    ]);
  });
});
