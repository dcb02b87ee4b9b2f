import { describe, expect, it } from 'vitest';
import { areaMm2, diameterMm, resistanceOhmPerM, THICKEST_AWG, THINNEST_AWG } from '@/lib/wire/gauge';

const gauges = Array.from({ length: THINNEST_AWG - THICKEST_AWG + 1 }, (_, index) => THICKEST_AWG + index);

describe('wire gauges', () => {
  it('grow thinner with every number, by the 39th root of 92', () => {
    for (const awg of gauges) expect(diameterMm(awg) / diameterMm(awg + 1)).toBeCloseTo(92 ** (1 / 39), 9);
  });

  it('do not mistake the area of 30 AWG for its diameter', () => {
    expect(areaMm2(30)).toBeCloseTo(0.0509, 4);
    expect(diameterMm(30)).toBeCloseTo(0.2546, 4);
  });

  it('resist 3.93 % more ten kelvin warmer', () => {
    expect(resistanceOhmPerM(30, 30) / resistanceOhmPerM(30)).toBeCloseTo(1.0393, 9);
  });
});
