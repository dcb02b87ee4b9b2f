import { describe, expect, it } from 'vitest';
import { checkProgram } from '@/lib/program/check';
import { generateProgram } from '@/lib/program/generate';
import { readProgram } from '@/lib/program/read';
import { exampleOrder, exampleProfile } from './example';

const { text } = generateProgram(exampleProfile, exampleOrder);

describe('the reader', () => {
  it('takes a whole program apart into its parts and steps', () => {
    const reading = readProgram(text, exampleProfile);
    expect(reading).toMatchObject({ ok: true });
    if (!reading.ok) return;
    const { program } = reading;
    expect(program.tag).toBe(42);
    expect(program.pieces).toHaveLength(3);
    expect(program.pieces[1]?.map((step) => step.kind)).toEqual([
      'feed',
      'feed',
      'feed',
      'cut',
      'await',
      'ask',
      'register',
      'standby',
    ]);
    expect(program.pieces[1]?.[6]).toEqual({
      line: 'G92 Y420002 E0',
      expectedMs: 0,
      kind: 'register',
      register: 420002,
      piece: 2,
    });
  });

  it('expects an ok after the motion that it waits for: M400 after all since the last one', () => {
    const reading = readProgram(text, exampleProfile);
    if (!reading.ok) throw new Error('refused');
    // By hand: a feed of 83.333 mm takes 1463.889 ms, the jaws' 5.5 mm 160 ms; opening from the piece before 160 ms more.
    const [first, , , cut, rest, ask] = reading.program.pieces[0] ?? [];
    expect(first?.expectedMs).toBeCloseTo(1463.889, 3);
    expect(cut?.expectedMs).toBeCloseTo(160, 9);
    expect(ask?.expectedMs).toBe(0);
    expect(rest?.expectedMs).toBeCloseTo(3 * 1463.889 + 160, 2);
    // The second piece's M400 also waits for the jaws that opened after the first.
    expect(reading.program.pieces[1]?.[4]?.expectedMs).toBeCloseTo(3 * 1463.889 + 160 + 160, 2);
  });

  it('waits for homing over the whole travel at 2 mm/s', () => {
    const reading = readProgram(text, exampleProfile);
    expect(reading.ok && reading.program.home[0]).toEqual({
      line: 'G28 Z',
      expectedMs: 11_000,
      kind: 'home',
    });
  });

  it('gives no tag and no register where the profile has no axis for one', () => {
    const bare = { ...exampleProfile, registerAxis: null };
    const reading = readProgram(generateProgram(bare, exampleOrder).text, bare);
    expect(reading.ok && reading.program.tag).toBeNull();
    expect(reading.ok && reading.program.pieces[2]?.[6]).toMatchObject({
      line: 'G92 E0',
      kind: 'register',
      register: null,
      piece: 3,
    });
  });

  it('finds nothing wrong with what was ordered', () => {
    expect(checkProgram(text, exampleProfile, exampleOrder)).toEqual([]);
  });
});
