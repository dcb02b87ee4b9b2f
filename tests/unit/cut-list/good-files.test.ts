import { describe, expect, it } from 'vitest';
import { readCutList } from '@/lib/services/batches/read-cut-list';
import { bytesOf, EARTH_26, GREEN_30, HEADER, KNOWN, WHITE_28 } from './example';

function utf16(text: string, littleEndian: boolean): Uint8Array {
  const bytes = new Uint8Array(text.length * 2);
  const view = new DataView(bytes.buffer);
  for (let index = 0; index < text.length; index += 1) {
    view.setUint16(index * 2, text.charCodeAt(index), littleEndian);
  }
  return bytes;
}

const ONE = `${HEADER}\nA1,63.5,40,30,ETFE,GN\n`;
const understood = {
  row: 2,
  label: 'A1',
  wire: GREEN_30,
  lengthMm: 63.5,
  toleranceMinusMm: 0,
  tolerancePlusMm: 3,
  pieces: 40,
};

const sameLine: [string, Uint8Array][] = [
  ['commas', bytesOf(ONE)],
  ['semicolons and decimal commas', bytesOf(ONE.replaceAll(',', ';').replace('63.5', '63,5'))],
  ['tabs and decimal commas', bytesOf(ONE.replaceAll(',', '\t').replace('63.5', '63,5'))],
  ['commas with a quoted decimal comma', bytesOf(ONE.replace('63.5', '"63,5"'))],
  ['a byte-order mark', bytesOf(`\uFEFF${ONE}`)],
  ['UTF-16, little end first, with its mark', utf16(`\uFEFF${ONE}`, true)],
  ['UTF-16, big end first, with its mark', utf16(`\uFEFF${ONE}`, false)],
  ['UTF-16 without a mark', utf16(ONE, true)],
  ['carriage returns and line feeds', bytesOf(ONE.replaceAll('\n', '\r\n'))],
  ['carriage returns alone', bytesOf(ONE.replaceAll('\n', '\r'))],
  ['no line break at the end', bytesOf(ONE.trimEnd())],
  [
    'headers in other case and with spaces',
    bytesOf(ONE.replace(HEADER, ' Label ,LENGTH (mm),Pieces,Gauge AWG,Insulation,Color')),
  ],
  [
    'columns in another order',
    bytesOf('colour,pieces,label,insulation,length_mm,gauge_awg\nGN,40,A1,ETFE,63.5,30\n'),
  ],
  ['all cells quoted', bytesOf(ONE.replaceAll(/[^,\n]+/g, '"$&"'))],
  ['a separator at the end of each row', bytesOf(ONE.replaceAll('\n', ',\n'))],
  ['inches in their own column', bytesOf(ONE.replace('length_mm', 'length_in').replace('63.5', '2.5'))],
  ['inches written as 2.5in', bytesOf(ONE.replace('63.5', '2.5in'))],
  ['inches written as 2.5"', bytesOf(ONE.replace('63.5', '2.5"'))],
  ['inches quoted as they should be', bytesOf(ONE.replace('63.5', '"2.5"""'))],
  ['mm beside the number', bytesOf(ONE.replace('63.5', '63.5 mm'))],
  ['numbers as a spreadsheet exports them', bytesOf(ONE.replace('40,30', '40.0,30.0'))],
  [
    'gauge with its letters, colour and insulation in small ones',
    bytesOf(ONE.replace('30,ETFE,GN', 'AWG 30,etfe,gn')),
  ],
  ['empty tolerances', bytesOf(`${HEADER},tolerance_minus_mm,tolerance_plus_mm\nA1,63.5,40,30,ETFE,GN,,\n`)],
];

describe('a cut list', () => {
  it.each(sameLine)('is understood alike with %s', (_how, bytes) => {
    expect(readCutList(bytes, KNOWN)).toEqual({ lines: [understood], problems: [], warnings: [] });
  });

  it('keeps the row numbers of the file over blank lines and quoted line breaks', () => {
    const text = `\n${HEADER}\n\n"A\n1",63.5,40,30,ETFE,GN\n,,,,,\nA2,10,1,28,PVDF,WH\n`;
    const { lines, problems } = readCutList(bytesOf(text), KNOWN);
    expect(problems).toEqual([]);
    expect(lines.map(({ row, label }) => [row, label])).toEqual([
      [4, 'A 1'],
      [7, 'A2'],
    ]);
  });

  it('obeys a first line that names the separator, and still counts it as a row', () => {
    const text = `sep=;\n${ONE.replaceAll(',', ';')}`;
    expect(readCutList(bytesOf(text), KNOWN).lines).toEqual([{ ...understood, row: 3 }]);
  });

  it('reads labels in the Western letters of older spreadsheets', () => {
    const bytes = Uint8Array.from(ONE.replace('A1', 'Lötstift'), (letter) => letter.charCodeAt(0));
    expect(readCutList(bytes, KNOWN).lines[0]?.label).toBe('Lötstift');
  });

  it('takes tolerances with or without their sign', () => {
    const text = `${HEADER},tolerance_minus_mm,tolerance_plus_mm\nA1,63.5,40,30,ETFE,GN,-0.5,+2\nA2,63.5,40,30,ETFE,GN,0,"1,5"\n`;
    const { lines, problems } = readCutList(bytesOf(text), KNOWN);
    expect(problems).toEqual([]);
    expect(lines.map((line) => [line.toleranceMinusMm, line.tolerancePlusMm])).toEqual([
      [0.5, 2],
      [0, 1.5],
    ]);
  });

  it('warns of green with yellow and of labels that come again, and reads both lines', () => {
    const text = `${HEADER}\nA1,63.5,40,26,ETFE,GNYE\nA1,50,2,28,PVDF,WH\n`;
    const { lines, problems, warnings } = readCutList(bytesOf(text), KNOWN);
    expect(problems).toEqual([]);
    expect(lines.map(({ wire }) => wire)).toEqual([EARTH_26, WHITE_28]);
    expect(warnings.map(({ row, column }) => [row, column])).toEqual([
      [2, 'colour'],
      [3, 'label'],
    ]);
  });

  it('warns of a column that it does not read', () => {
    const text = ONE.replace('colour', 'colour,remark').replace('GN', 'GN,for the bench');
    const { problems, warnings } = readCutList(bytesOf(text), KNOWN);
    expect(problems).toEqual([]);
    expect(warnings).toMatchObject([{ row: 1, column: 'remark' }]);
  });

  it('holds exactly as many lines as a batch may', () => {
    const lines = Array.from({ length: 2000 }, (_, index) => `L${index},10,1,30,ETFE,GN`);
    expect(readCutList(bytesOf([HEADER, ...lines].join('\n')), KNOWN).problems).toEqual([]);
    expect(
      readCutList(bytesOf([HEADER, ...lines, 'L,10,1,30,ETFE,GN'].join('\n')), KNOWN).problems,
    ).toMatchObject([{ row: null, found: '2001 lines' }]);
  });
});
