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

  it('finds nothing wrong with what was ordered', () => {
    expect(checkProgram(text, exampleProfile, exampleOrder)).toEqual([]);
  });
});
