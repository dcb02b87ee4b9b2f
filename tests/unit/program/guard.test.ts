import { describe, expect, it } from 'vitest';
import { guardDelayS, guardWords } from '@/lib/program/guard';
import type { Profile } from '@/lib/program/profile';
import { exampleProfile } from './example';

const fitted = (change: Partial<Profile['fitted']>, profile = exampleProfile): Profile => ({
  ...profile,
  fitted: { ...profile.fitted, ...change },
});
const telling = fitted({ guardCutsMotorPower: false });
const declared = { ...telling, cutAxis: { ...telling.cutAxis, homing: 'declared' as const } };

describe('from the opening of a guard to the last motion', () => {
  it('it takes no time where the guard cuts motor power, switch or not', () => {
    expect(guardDelayS(fitted({ guardCutsMotorPower: true }))).toBe(0);
    expect(guardDelayS(fitted({ guardCutsMotorPower: true, guardSwitch: null }))).toBe(0);
  });

  it('there is no bound where nothing tells that it is open', () => {
    expect(guardDelayS(fitted({ guardCutsMotorPower: false, guardSwitch: null }))).toBeNull();
  });

  it('it takes a reading’s second, the longest part and a stroke, worked by hand', () => {
    // 250 mm: three feeds of 1.463889 s and two strokes of 0.16 s; 8 lines and 3 between of 0.03 s. And a stroke.
    expect(guardDelayS(declared, 250)).toBeCloseTo(1 + 3 * 1.463889 + 2 * 0.16 + 11 * 0.03 + 0.16, 4);
  });

  it('homing is the longest part of short pieces: the whole travel at 2 mm/s, worked by hand', () => {
    // 22 mm at 2 mm/s; 6 mm from home to standby at 50 mm/s and 1000 mm/s²; 5 lines and 3 between; and a stroke.
    expect(guardDelayS(telling, 20)).toBeCloseTo(1 + 11 + 0.17 + 8 * 0.03 + 0.16, 6);
  });

  it('it is reckoned for the longest piece of the profile when no length is given', () => {
    expect(guardDelayS(declared)).toBe(guardDelayS(declared, declared.feed.longestPieceMm));
  });
});

describe('a guard’s words', () => {
  it.each([
    [0, 'stop at once'],
    [5.2, 'up to 6 s.'],
    [119, 'up to 119 s.'],
    [120.5, 'up to 3 min.'],
    [null, 'cuts on'],
  ])('for a delay of %s s never promise less', (delayS, words) => {
    expect(guardWords(delayS)).toContain(words);
    if (delayS !== 0) expect(guardWords(delayS)).toContain('Keep your hands out');
  });
});
