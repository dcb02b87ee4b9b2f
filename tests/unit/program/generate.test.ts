import { describe, expect, it } from 'vitest';
import { generateProgram } from '@/lib/program/generate';
import { exampleOrder, exampleProfile } from './example';

const plainest = {
  ...exampleProfile,
  cutAxis: { ...exampleProfile.cutAxis, homing: 'declared' as const },
  fitted: { ...exampleProfile.fitted, wireSwitch: false },
  registerAxis: null,
};

describe('a generated program', () => {
  it('is the run of design.md 5, line by line', () => {
    const { text } = generateProgram(exampleProfile, { tag: 42, pieces: 2, lengthMm: 250 });
    // 250 mm · 1.02 = 255 E units in three moves of 85; F of the feed is 60 · 1.02 · 60 = 3672.
    const piece = (n: number) => [
      `;@ piece ${n}`,
      'G1 E85 F3672',
      'G1 E170 F3672',
      'G1 E255 F3672',
      'G1 Z-1.5 F3000',
      'M400',
      'M114',
      `G92 Y${420000 + n} E0`,
      'G1 Z4 F3000',
    ];
    expect(text.split('\n')).toEqual([
      ';@ preamble',
      'M302 P1',
      'M84 S0',
      'M211 S0',
      'M412 H1',
      'M75',
      'G90',
      'M82',
      'G92 E0',
      ';@ home',
      'G28 Z',
      'G92 Z10',
      'G1 Z4 F3000',
      'M400',
      'M114',
      ';@ trim',
      'G92 E0',
      'G1 E8.16 F3672',
      'G1 Z-1.5 F3000',
      'M400',
      'M114',
      'G92 E0',
      'G1 Z4 F3000',
      'M400',
      ';@ register',
      'G92 Y420000 E0',
      ...piece(1),
      ...piece(2),
      ';@ end',
      'M77',
      'M400',
      'G1 Z12 F3000',
      'M400',
      'M114',
      '',
    ]);
  });

  it('says nothing of end stop, wire switch and register where the rig has none', () => {
    const { text } = generateProgram(plainest, exampleOrder);
    for (const absent of ['G28', 'M211', 'M412', 'M75', 'M77', 'G92 Y']) expect(text).not.toContain(absent);
    expect(text).toContain(';@ register\nG92 E0\n;@ piece 1\n');
  });

  it('counts its pieces and the wire with the trim', () => {
    expect(generateProgram(exampleProfile, exampleOrder)).toMatchObject({ pieces: 3, wireMm: 758 });
  });

  it('writes 9,999 pieces of tag 99 with a register of six digits', () => {
    const { text } = generateProgram(exampleProfile, { tag: 99, pieces: 9999, lengthMm: 20 });
    expect(text).toContain('G92 Y999999 E0\n');
    expect(text).toContain(';@ piece 9999\n');
  });
});
