import { describe, expect, it } from 'vitest';
import { LINE_TURNAROUND_S, pieceDurationS, programDurationS } from '@/lib/program/duration';
import { generateProgram } from '@/lib/program/generate';
import { exampleOrder, exampleProfile } from './example';

describe('the duration of a piece', () => {
  it('is its feeds, two strokes of the jaws and a turnaround for each line, worked by hand', () => {
    // 250 mm at feed 1.02 in three moves of 83.333 mm: each 83.333/60 + 60/800 = 1.463889 s.
    // A stroke of 5.5 mm at 50 mm/s and 1000 mm/s²: 5.5/50 + 50/1000 = 0.16 s. Eight lines of 2 ms.
    expect(pieceDurationS(exampleProfile, 250)).toBeCloseTo(3 * 1.463889 + 2 * 0.16 + 8 * 0.002, 5);
  });

  it('grows by one turnaround a line and nothing else when the link is slower', () => {
    const slower = pieceDurationS(exampleProfile, 250, LINE_TURNAROUND_S + 0.01);
    expect(slower - pieceDurationS(exampleProfile, 250)).toBeCloseTo(8 * 0.01, 9);
  });
});

describe('the duration of a program', () => {
  it('grows by exactly a piece for each piece more', () => {
    const of = (pieces: number) => programDurationS(exampleProfile, { ...exampleOrder, pieces });
    expect(of(101) - of(1)).toBeCloseTo(100 * pieceDurationS(exampleProfile, 250), 6);
  });

  it('is what the generated program carries', () => {
    expect(generateProgram(exampleProfile, exampleOrder)).toMatchObject({
      durationS: programDurationS(exampleProfile, exampleOrder),
      pieceDurationS: pieceDurationS(exampleProfile, exampleOrder.lengthMm),
    });
  });

  it('says how much of it is homing: the whole travel at 4 mm/s', () => {
    const declared = {
      ...exampleProfile,
      cutAxis: { ...exampleProfile.cutAxis, homing: 'declared' as const },
    };
    const differenceS =
      programDurationS(exampleProfile, exampleOrder, 0) - programDurationS(declared, exampleOrder, 0);
    expect(differenceS).toBeCloseTo(22 / 4, 9);
  });
});
