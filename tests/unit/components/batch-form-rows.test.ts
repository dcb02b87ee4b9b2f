import { describe, expect, it } from 'vitest';
import { changeRows, type FormRows, linesOfRows, newRows, rowProblem } from '@/components/batches/form-rows';

const GREEN = '00000000-0000-4000-8000-000000000001';
const BLUE = '00000000-0000-4000-8000-000000000002';
const USUAL = { wireId: GREEN, minus: '0', plus: '3' };

function typed(
  texts: Partial<Record<'label' | 'wireId' | 'length' | 'pieces' | 'minus' | 'plus', string>>,
): FormRows {
  const fields = Object.entries(texts) as ['label', string][];
  return fields.reduce(
    (state, [field, text]) => changeRows(state, { act: 'type', key: 1, field, text }),
    newRows(USUAL),
  );
}

const GOOD = { label: ' A1 ', length: '2.5in', pieces: '40', plus: '1,5' };

describe('the lines of a batch’s form', () => {
  it('become an input with lengths in mm and numbers with either decimal mark', () => {
    const { lines, fields } = linesOfRows(typed(GOOD).rows);
    expect(fields).toEqual([]);
    expect(lines).toEqual([
      {
        id: null,
        label: 'A1',
        wireId: GREEN,
        lengthMm: 63.5,
        toleranceMinusMm: 0,
        tolerancePlusMm: 1.5,
        pieces: 40,
      },
    ]);
  });

  it.each([
    ['label', '', 'Give the line a label.'],
    ['length', 'long', 'Enter a length in mm.'],
    ['length', '20001', 'At most 20,000 mm.'],
    ['pieces', '', 'Enter a whole number.'],
    ['pieces', '1.5', 'Enter a whole number.'],
    ['pieces', '0', 'At least 1.'],
    ['minus', '-1', 'Not below 0.'],
    ['wireId', '', 'Pick a wire.'],
  ] as const)('say what is wrong with %s %j', (field, text, message) => {
    const { fields } = linesOfRows(typed({ ...GOOD, [field]: text }).rows);
    expect(rowProblem(fields, 0, field)).toBe(message);
    expect(fields).toHaveLength(1);
  });

  it('grow by a line with the wire and tolerance of the one above', () => {
    const { rows } = changeRows(typed({ ...GOOD, wireId: BLUE }), { act: 'add', usual: USUAL });
    expect(rows[1]).toMatchObject({
      id: null,
      label: '',
      wireId: BLUE,
      length: '',
      plus: '1,5',
      committed: 0,
    });
    expect(rows[1]?.key).not.toBe(rows[0]?.key);
  });

  it('never go below one line, and never lose one that is cut in part', () => {
    const emptied = changeRows(typed(GOOD), { act: 'remove', key: 1, usual: USUAL });
    expect(emptied.rows).toMatchObject([{ label: '', wireId: GREEN }]);
    const begun = { rows: [{ ...emptied.rows[0], key: 7, committed: 3 }], nextKey: 8 } as FormRows;
    expect(changeRows(begun, { act: 'remove', key: 7, usual: USUAL })).toEqual(begun);
  });
});
