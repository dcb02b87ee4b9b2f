import { describe, expect, it } from 'vitest';
import {
  COLOUR_LETTERS,
  colourCode,
  colourHexes,
  colourName,
  INSULATION_EDGE_HEX,
  isEarthColour,
  parseColour,
} from '@/lib/wire/colour';

/** Relative luminance and contrast as WCAG 2 defines them. */
function luminance(hex: string): number {
  const [red = 0, green = 0, blue = 0] = [1, 3, 5].map((at) => {
    const share = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

function contrast(one: string, other: string): number {
  const [light = 0, dark = 0] = [luminance(one), luminance(other)].sort((a, b) => b - a);
  return (light + 0.05) / (dark + 0.05);
}

describe('a colour code', () => {
  it.each([
    ['GN', 'GN', 'green'],
    ['gn', 'GN', 'green'],
    [' wh ', 'WH', 'white'],
    ['RDBU', 'RDBU', 'red-blue'],
    ['BURD', 'RDBU', 'red-blue'],
    ['bu/rd', 'RDBU', 'red-blue'],
    ['WH-BK', 'BKWH', 'black-white'],
    ['GNYE', 'GNYE', 'green-yellow'],
    ['YEGN', 'GNYE', 'green-yellow'],
  ])('%j is read as %s, %s', (text, code, name) => {
    const colour = parseColour(text);
    expect(colour && colourCode(colour)).toBe(code);
    expect(colour && colourName(colour)).toBe(name);
  });

  it.each(['', 'G', 'green', 'XX', 'GNGN', 'GNXX', 'RDBUGN', 'G N', 'RD//BU'])('%j is none', (text) =>
    expect(parseColour(text)).toBeNull(),
  );

  it('is warned of as protective earth only when it is green with yellow', () => {
    const warned = COLOUR_LETTERS.flatMap((one) => COLOUR_LETTERS.map((other) => `${one}${other}`)).filter(
      (text) => {
        const colour = parseColour(text);
        return colour !== null && isEarthColour(colour);
      },
    );
    expect(warned.sort()).toEqual(['GNYE', 'YEGN']);
  });
});

describe('drawn insulation', () => {
  const all = COLOUR_LETTERS.map((letters) => colourHexes([letters])[0] ?? '');

  it.each(['#f3f0e8', '#fbfaf5', '#1d2224'])('stands out from %s by its fill or its edge', (ground) => {
    for (const fill of all) {
      expect(Math.max(contrast(fill, ground), contrast(INSULATION_EDGE_HEX, ground))).toBeGreaterThan(3);
    }
  });

  it('has another fill for each colour, and both for two', () => {
    expect(new Set(all).size).toBe(COLOUR_LETTERS.length);
    expect(colourHexes(['RD', 'BU'])).toEqual([...colourHexes(['RD']), ...colourHexes(['BU'])]);
  });
});
