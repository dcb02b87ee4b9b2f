import { describe, expect, it } from 'vitest';
import { COLOUR_LETTERS } from '@/lib/wire/colour';
import { areaMm2, copperGPerM, diameterMm, resistanceOhmPerM } from '@/lib/wire/gauge';

const FEET_PER_KM = 3280.8399;
const M_PER_FOOT = 0.3048;
const G_PER_POUND = 453.59237;

/** Within half of the last digit that is printed. */
const near = (value: number, printed: number, step: number) =>
  expect(Math.abs(value - printed)).toBeLessThanOrEqual(step / 2 + 1e-12);

// trade.md 2: ASTM B258 diameters, annealed copper 0.017241 Ω·mm²/m and 8.89 g/cm³ (IEC value). D from the formula.
const table: [number, number, number, number, number][] = [
  [20, 0.8118, 0.51762, 33.31, 4.6016],
  [24, 0.5106, 0.20473, 84.21, 1.8201],
  [26, 0.4049, 0.12876, 133.9, 1.1446],
  [28, 0.3211, 0.08098, 212.92, 0.7199],
  [30, 0.2546, 0.05093, 338.55, 0.4527],
  [32, 0.2019, 0.03203, 538.3, 0.2847],
];

describe('the wire table (trade.md 2)', () => {
  it.each(table)('%d AWG: %d mm, %d mm², %d Ω/km, %d g/m', (awg, diameter, area, ohmPerKm, gPerM) => {
    near(diameterMm(awg), diameter, 0.0001);
    near(areaMm2(awg), area, 0.00001);
    near(resistanceOhmPerM(awg) * 1000, ohmPerKm, ohmPerKm > 500 ? 0.1 : 0.01);
    near(copperGPerM(awg), gPerM, 0.0001);
  });

  // Published tables take the copper of their own time; half a percent is what they differ by among themselves.
  it.each([
    [24, 25.67],
    [26, 40.81],
    [28, 64.9],
    [30, 103.2],
  ])('%d AWG agrees with the published %d Ω per 1000 ft (P)', (awg, published) => {
    const ohm = (resistanceOhmPerM(awg) * 1000) / (FEET_PER_KM / 1000);
    expect(Math.abs(ohm / published - 1)).toBeLessThan(0.005);
  });

  it.each([
    [20, 323.4],
    [24, 817.7],
    [26, 1300],
  ])('%d AWG agrees with the published %d ft a pound (P)', (awg, published) => {
    const feet = G_PER_POUND / (copperGPerM(awg) * M_PER_FOOT);
    expect(Math.abs(feet / published - 1)).toBeLessThan(0.005);
  });

  it('has the colour letters of IEC 60757 in their order (R, trade.md 4)', () => {
    expect(COLOUR_LETTERS.join(' ')).toBe('BK BN RD OG YE GN BU VT GY WH PK GD TQ SR');
  });
});
