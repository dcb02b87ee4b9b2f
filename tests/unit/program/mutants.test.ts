import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkProgram } from '@/lib/program/check';
import { generateProgram } from '@/lib/program/generate';
import { readProgram } from '@/lib/program/read';
import { profilesWithOrders } from './arbitrary';
import { exampleOrder, exampleProfile } from './example';

const { text } = generateProgram(exampleProfile, exampleOrder);
const lines = text.trimEnd().split('\n');

/** Replaces the `nth` (from 1) line equal to `from`; a mutant that changes nothing is a mistake of the table. */
function swap(from: string, to: string[], nth = 1): string {
  const places = lines.flatMap((line, index) => (line === from ? [index] : []));
  const at = places[nth - 1];
  if (at === undefined) throw new Error(`no line ${from}`);
  return [...lines.slice(0, at), ...to, ...lines.slice(at + 1)].join('\n');
}

const refusedAt = (mutant: string) => {
  const reading = readProgram(mutant, exampleProfile);
  return reading.ok ? [] : reading.problems;
};

const SHUT = 'G1 Z-1.5 F3000';
const OPEN = 'G1 Z4 F3000';
const FEED = 'G1 E170 F3672';

const mutants: [string, string][] = [
  ['cuts below the lowest position', swap(SHUT, ['G1 Z-2.5 F3000'], 2)],
  ['opens above the highest position', swap(OPEN, ['G1 Z21 F3000'], 3)],
  ['cuts short of the cut position', swap(SHUT, ['G1 Z-1 F3000'], 2)],
  ['parks elsewhere', swap('G1 Z12 F3000', ['G1 Z13 F3000'])],
  ['declares another home', swap('G92 Z10', ['G92 Z0'])],
  ['homes all axes', swap('G28 Z', ['G28'])],
  ['homes the register axis', swap('G28 Z', ['G28 Y'])],
  ['moves the register axis', swap(FEED, [FEED, 'G1 Y5 F3000'])],
  ['moves an axis that the rig has no use for', swap(FEED, [FEED, 'G1 X5 F3000'])],
  ['moves two axes at once', swap(FEED, ['G1 E170 Z-1.5 F3000'])],
  ['travels with G0', swap(OPEN, ['G0 Z4 F3000'], 3)],
  ['cuts faster than the profile', swap(SHUT, ['G1 Z-1.5 F3001'], 2)],
  ['feeds faster than the profile', swap(FEED, ['G1 E170 F3673'])],
  ['moves without saying how fast', swap(FEED, ['G1 E170'])],
  ['moves at no speed', swap(FEED, ['G1 E170 F0'])],
  ['feeds more than the longest move', swap('G1 E85 F3672', ['G1 E20 F3672'])],
  ['feeds backwards', swap(FEED, [FEED, 'G1 E85 F3672'])],
  ['feeds to where it is', swap(FEED, [FEED, FEED])],
  ['feeds with the jaws shut', swap(SHUT, [SHUT, 'G1 E260 F3672'], 2)],
  ['feeds while the jaws still shut in the trim', swap('G1 E8.16 F3672', [SHUT, 'G1 E8.16 F3672'])],
  ['trims another length', swap('G1 E8.16 F3672', ['G1 E9 F3672'])],
  ['cuts one piece longer than the others', swap('G1 E255 F3672', ['G1 E256 F3672'], 2)],
  [
    'counts before motion has ended',
    text.replace('M400\nM114\nG92 Y420002 E0', 'G92 Y420002 E0\nM400\nM114'),
  ],
  ['skips a piece', swap('G92 Y420002 E0', ['G92 Y420003 E0'])],
  ['counts a piece twice', swap('G92 Y420003 E0', ['G92 Y420002 E0'])],
  ['changes its tag on the way', swap('G92 Y420002 E0', ['G92 Y430002 E0'])],
  ['begins at a piece', swap('G92 Y420000 E0', ['G92 Y420001 E0'])],
  ['bears tag 0', text.replaceAll('Y42', 'Y')],
  ['bears tag 100', text.replaceAll('Y42', 'Y100')],
  ['keeps the count in the cut axis', swap('G92 Y420001 E0', ['G92 Z420001 E0'])],
  ['counts without zeroing the feed', swap('G92 Y420001 E0', ['G92 Y420001'])],
  ['zeroes the feed without counting', swap('G92 Y420001 E0', ['G92 E0'])],
  ['heats', swap('G90', ['M104 S200', 'G90'])],
  ['waits for heat', swap('G90', ['M109 S200', 'G90'])],
  ['goes relative', swap('G90', ['G91'])],
  ['feeds relative', swap('M82', ['M83'])],
  ['forbids cold feed', swap('M302 P1', ['M302 S0'])],
  ['lets the steppers go', swap('M84 S0', ['M84'])],
  ['stores settings', swap('M82', ['M82', 'M500'])],
  ['has lower case', swap('M82', ['m82'])],
  ['has an exponent', swap(FEED, ['G1 E1.7E2 F3672'])],
  ['has a number of its own', swap('M82', ['N8 M82'])],
  ['has a carriage return', swap('M82', ['M82\r'])],
  ['has an empty line', swap('M82', ['M82', ''])],
  ['has a comment behind a command', swap('M82', ['M82 ;@ home'])],
  ['has a comment that marks nothing', swap('M82', ['; absolute', 'M82'])],
  ['has a line too long', swap(FEED, [`G1 E170 F3672${' '.repeat(60)}`])],
  ['has a word twice', swap(FEED, ['G1 E170 E170 F3672'])],
  ['has pieces out of order', swap(';@ piece 2', [';@ piece 3'])],
  [
    'has no piece',
    lines
      .slice(0, lines.indexOf(';@ piece 1'))
      .concat(lines.slice(lines.indexOf(';@ end')))
      .join('\n'),
  ],
  ['has a second end', `${text};@ end`],
  ['goes on after its end', `${text}G1 Z4 F3000`],
  ['begins before its first part', `G90\n${text}`],
  ['is empty', ''],
];

describe('the reader refuses a program that', () => {
  it.each(mutants)('%s', (_, mutant) => {
    expect(mutant).not.toBe(text);
    expect(refusedAt(mutant)).not.toEqual([]);
  });
});

describe('the reader', () => {
  it('refuses the program without any one of its lines', () => {
    for (const [index, line] of lines.entries()) {
      const mutant = lines.filter((_, other) => other !== index).join('\n');
      expect(refusedAt(mutant), `without line ${index + 1}, ${line}`).not.toEqual([]);
    }
  });

  it('refuses the program with any one of its lines twice', () => {
    for (const [index, line] of lines.entries()) {
      const mutant = [...lines.slice(0, index), line, ...lines.slice(index)].join('\n');
      expect(refusedAt(mutant), `line ${index + 1} twice, ${line}`).not.toEqual([]);
    }
  });

  it('refuses the program with any two different neighbours swapped, but for settings among themselves', () => {
    const settings = lines.slice(1, lines.indexOf('G92 E0'));
    for (let index = 0; index + 1 < lines.length; index += 1) {
      const [here = '', next = ''] = lines.slice(index, index + 2);
      if (settings.includes(here) && settings.includes(next)) continue;
      const mutant = [...lines.slice(0, index), next, here, ...lines.slice(index + 2)].join('\n');
      expect(refusedAt(mutant), `lines ${index + 1} and ${index + 2} swapped`).not.toEqual([]);
    }
  });

  it('names the line', () => {
    const at = lines.indexOf('G92 Y420002 E0') + 1;
    expect(refusedAt(swap('G92 Y420002 E0', ['G92 Y420003 E0']))).toEqual([
      { lineNumber: at, message: 'The register of piece 2 is 420002.' },
    ]);
  });

  it('stops at twenty problems', () => {
    expect(refusedAt('M104 s200\n'.repeat(500))).toHaveLength(20);
    expect(refusedAt(text.replaceAll('F3000', 'F9000')).length).toBeLessThanOrEqual(20);
    const long = generateProgram(exampleProfile, { ...exampleOrder, pieces: 50 }).text;
    expect(refusedAt(long.replaceAll('F3000', 'F9000'))).toHaveLength(20);
  });

  it('refuses ten thousand pieces and reads 9,999', () => {
    const most = { ...exampleOrder, pieces: 9999 };
    const program = generateProgram(exampleProfile, most).text;
    expect(checkProgram(program, exampleProfile, most)).toEqual([]);
    const piece = program.slice(program.indexOf(';@ piece 9999'), program.indexOf(';@ end'));
    const tooMany = program.replace(';@ end', `${piece.replace('piece 9999', 'piece 10000')};@ end`);
    expect(refusedAt(tooMany)[0]?.message).toContain('1 to 9999 pieces');
  });

  it('refuses a program made for another profile', () => {
    const other = { ...exampleProfile, cutAxis: { ...exampleProfile.cutAxis, cutMm: -1 } };
    expect(readProgram(text, other).ok).toBe(false);
    expect(readProgram(text, { ...exampleProfile, registerAxis: null }).ok).toBe(false);
    const slower = { ...exampleProfile, feed: { ...exampleProfile.feed, speedMmS: 59 } };
    expect(readProgram(text, slower).ok).toBe(false);
    const recalibrated = { ...exampleProfile, feed: { ...exampleProfile.feed, feedPerMm: 1.03 } };
    expect(readProgram(text, recalibrated).ok).toBe(false);
  });

  it('refuses any program without any one of its lines, against the order', () => {
    fc.assert(
      fc.property(
        profilesWithOrders,
        fc.double({ min: 0, max: 1, noNaN: true }),
        ({ profile, order }, share) => {
          const whole = generateProgram(profile, order).text.trimEnd().split('\n');
          const without = Math.min(whole.length - 1, Math.floor(share * whole.length));
          const mutant = whole.filter((_, index) => index !== without).join('\n');
          expect(checkProgram(mutant, profile, order), `without ${whole[without]}`).not.toEqual([]);
        },
      ),
      { numRuns: 200 },
    );
  });
});

describe('the check against the order', () => {
  it.each([
    ['tag', { ...exampleOrder, tag: 41 }, 'The tag is 42, not 41.'],
    ['number of pieces', { ...exampleOrder, pieces: 4 }, 'It cuts 3 pieces, not 4.'],
    ['length', { ...exampleOrder, lengthMm: 250.01 }, 'It cuts pieces of 250 mm, not 250.01 mm.'],
  ])('tells another %s', (_, order, message) => {
    expect(checkProgram(text, exampleProfile, order)).toEqual([{ lineNumber: 1, message }]);
  });

  it('refuses a length that the profile does not allow, at its edges', () => {
    const problemsOf = (lengthMm: number) => {
      const order = { ...exampleOrder, lengthMm };
      return checkProgram(generateProgram(exampleProfile, order).text, exampleProfile, order).length;
    };
    expect([9.99, 10, 3000, 3000.01].map(problemsOf)).toEqual([3, 0, 0, 3]);
  });
});
