import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { readCutList } from '@/lib/services/batches/read-cut-list';
import { bytesOf, HEADER, KNOWN } from './example';

/** One good line in which one cell is replaced. */
function withCell(column: string, cell: string): string {
  const cells: Record<string, string> = {
    label: 'A1',
    length_mm: '63.5',
    pieces: '40',
    gauge_awg: '30',
    insulation: 'ETFE',
    colour: 'GN',
    tolerance_minus_mm: '0',
    tolerance_plus_mm: '3',
    [column]: cell,
  };
  return `${Object.keys(cells).join(',')}\n${Object.values(cells).join(',')}\n`;
}

/** Column, what stands in it, and what the answer must tell to write instead. */
const badCells: [string, string, RegExp][] = [
  ['label', '', /Write a label/],
  ['label', 'x'.repeat(81), /80 characters/],
  ['length_mm', '', /Write a length/],
  ['length_mm', 'long', /Write a number over 0/],
  ['length_mm', '-63.5', /Write a number over 0/],
  ['length_mm', '0', /over 0/],
  ['length_mm', '0.0001', /over 0/],
  ['length_mm', '20000.1', /at most 20000/],
  ['length_mm', '1e3', /Write a number/],
  ['length_mm', '"1,200"', /Write 1200, or 1.200/],
  ['length_mm', '"1.234,5"', /Write 1234.5/],
  ['length_mm', "1'234.5", /Write 1234.5/],
  ['length_mm', '63.5 cm', /Write a number/],
  ['pieces', '', /how many pieces/],
  ['pieces', '0', /at least 1/],
  ['pieces', '-4', /whole number/],
  ['pieces', '4.5', /whole number/],
  ['pieces', 'forty', /whole number/],
  ['pieces', '"1,000"', /Write 1000/],
  ['pieces', '100001', /at most 100000/],
  ['gauge_awg', '', /AWG number/],
  ['gauge_awg', '0.25', /AWG number/],
  ['gauge_awg', '12', /20 to 40/],
  ['insulation', '', /Write the insulation/],
  ['colour', '', /IEC 60757/],
  ['colour', 'green', /Write GN\./],
  ['colour', 'GNGN', /IEC 60757/],
  ['tolerance_minus_mm', '+1', /Write mm/],
  ['tolerance_plus_mm', 'three', /Write mm/],
  ['tolerance_plus_mm', '1001', /at most 1000/],
];

/** Whole files that cannot be read, and the words that say why. */
const badFiles: [string, Uint8Array, RegExp][] = [
  ['nothing at all', new Uint8Array(), /empty file/],
  ['blank lines only', bytesOf('\n  \n\n'), /no rows/],
  ['a header only', bytesOf(HEADER), /no lines/],
  ['lines without a header', bytesOf('A1,63.5,40,30,ETFE,GN\n'), /no header/],
  ['a spreadsheet', Uint8Array.of(0x50, 0x4b, 3, 4, 20, 0, 6, 0), /spreadsheet/],
  ['an old spreadsheet', Uint8Array.of(0xd0, 0xcf, 0x11, 0xe0, 0xa1), /spreadsheet/],
  ['a PDF', bytesOf('%PDF-1.7\n'), /PDF/],
  ['a picture', Uint8Array.of(0x89, 0x50, 0x4e, 0x47, 13, 10, 26, 10, 0, 0, 0), /no text/],
  ['a quote that is never closed', bytesOf(`${HEADER}\n"A1,63.5,40,30,ETFE,GN\n`), /quotes/],
  ['more than a megabyte', new Uint8Array(1_000_001).fill(65), /1001 kB/],
];

describe('a bad cell', () => {
  it.each(badCells)(
    'in %s, %j, is told with its row, its column and what to write',
    (column, cell, instead) => {
      const { problems } = readCutList(bytesOf(withCell(column, cell)), KNOWN);
      expect(problems).toEqual([
        { row: 2, column, found: expect.any(String), instead: expect.stringMatching(instead) },
      ]);
    },
  );

  it('does not hide the other bad cells of its row, nor the lines around it', () => {
    const text = `${HEADER}\nA1,63.5,40,30,ETFE,GN\nA2,x,y,z,,\nA3,10,1,28,PVDF,WH\n`;
    const { lines, problems } = readCutList(bytesOf(text), KNOWN);
    expect(problems.map(({ row, column }) => [row, column])).toEqual([
      [3, 'gauge_awg'],
      [3, 'colour'],
      [3, 'insulation'],
      [3, 'length_mm'],
      [3, 'pieces'],
    ]);
    expect(lines.map(({ wire }) => wire?.colour)).toEqual(['GN', undefined, 'WH']);
  });

  it('from an unquoted decimal comma says how to write the row', () => {
    const { problems } = readCutList(bytesOf(`${HEADER}\nA1,63,5,40,30,ETFE,GN\n`), KNOWN);
    expect(problems[0]).toMatchObject({ row: 2, instead: expect.stringMatching(/decimal points/) });
  });

  it('of a wire the workshop has not got offers the near ones and where to add it', () => {
    const { problems } = readCutList(bytesOf(withCell('gauge_awg', '29')), KNOWN);
    expect(problems).toMatchObject([{ row: 2, found: expect.stringMatching(/GN 29 AWG ETFE/) }]);
    expect(problems[0]?.instead).toMatch(/GN 30 AWG ETFE.*add this wire/);
    const far = readCutList(bytesOf(withCell('colour', 'PK').replace('30', '40')), KNOWN);
    expect(far.problems[0]?.instead).toBe('Add this wire in set-up first.');
  });
});

describe('a bad header', () => {
  it.each(HEADER.split(','))('without %s says to add it', (column) => {
    const text = withCell('label', 'A1').replace(column, 'elsewhere');
    const { problems } = readCutList(bytesOf(text), KNOWN);
    expect(problems).toContainEqual({
      row: 1,
      column,
      found: 'no such column',
      instead: `Add a column named ${column}.`,
    });
  });

  it('says which of its columns was probably meant', () => {
    const { problems, warnings } = readCutList(
      bytesOf(withCell('label', 'A1').replace('pieces', 'Qty')),
      KNOWN,
    );
    expect(problems).toMatchObject([{ column: 'pieces' }]);
    expect(warnings).toMatchObject([
      { row: 1, found: 'Qty', instead: expect.stringMatching(/name the column pieces/) },
    ]);
  });

  it('with a column twice, or a length in both units, is refused', () => {
    const twice = readCutList(bytesOf(`${HEADER},Pieces\nA1,63.5,40,30,ETFE,GN,41\n`), KNOWN);
    expect(twice.problems).toMatchObject([{ row: 1, column: 'pieces', found: 'this column twice' }]);
    const both = readCutList(bytesOf(`${HEADER},length_in\nA1,63.5,40,30,ETFE,GN,2.5\n`), KNOWN);
    expect(both.problems).toContainEqual(expect.objectContaining({ row: 1, column: 'length_in' }));
  });
});

describe('a file that is no cut list', () => {
  it.each(badFiles)('such as %s has no line and one problem', (_what, bytes, found) => {
    const { lines, problems } = readCutList(bytes, KNOWN);
    expect(lines).toEqual([]);
    expect(problems).toHaveLength(1);
    expect(problems[0]?.found).toMatch(found);
    expect(problems[0]?.instead).not.toBe('');
  });
});

describe('any file at all', () => {
  const complete = (line: object): boolean => Object.values(line).every((value) => value !== null);

  it('made of any bytes is read without an error', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 400 }), (bytes) => {
        const { lines, problems } = readCutList(bytes, KNOWN);
        expect(lines.every(complete) || problems.length > 0).toBe(true);
      }),
      { numRuns: 500 },
    );
  });

  it('made of cells, quotes and separators is read without an error, and says a problem for each lack', () => {
    const cell = fc.oneof(
      fc.constantFrom(
        'A1',
        '63.5',
        '"63,5"',
        '40',
        '30',
        'ETFE',
        'GN',
        'GNYE',
        '',
        '"',
        '""',
        'é',
        '2.5"',
        '\r',
      ),
      fc.string({ maxLength: 8 }),
    );
    const row = fc.array(cell, { maxLength: 9 });
    const file = fc.tuple(fc.constantFrom(',', ';', '\t'), fc.array(row, { maxLength: 8 }));
    fc.assert(
      fc.property(file, ([separator, rows]) => {
        const header = HEADER.replaceAll(',', separator);
        const text = [header, ...rows.map((cells) => cells.join(separator))].join('\n');
        const { lines, problems } = readCutList(bytesOf(text), KNOWN);
        expect(lines.every(complete) || problems.length > 0).toBe(true);
      }),
      { numRuns: 500 },
    );
  });
});
