import { expect, it } from 'vitest';
import { fullWireName, wireName } from '@/lib/wire/name';

it('names a wire by its letters and gauge, and in full with its colour in words', () => {
  expect(wireName({ colour: 'GN', gaugeAwg: 30 })).toBe('GN 30 AWG');
  expect(fullWireName({ colour: 'GN', gaugeAwg: 30, insulation: 'ETFE' })).toBe('GN green, 30 AWG ETFE');
  expect(fullWireName({ colour: 'RDBU', gaugeAwg: 28, insulation: 'PVDF' })).toBe(
    'RDBU red-blue, 28 AWG PVDF',
  );
});

it('leaves out what is not known rather than inventing it', () => {
  expect(fullWireName({ colour: 'ZZ', gaugeAwg: 26, insulation: '' })).toBe('ZZ, 26 AWG');
});
