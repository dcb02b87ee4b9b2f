interface DemoWire {
  gaugeAwg: number;
  colour: string;
  insulation: string;
  outsideDiameterMm: number;
}

const thin = (colour: string): DemoWire => ({
  gaugeAwg: 30,
  colour,
  insulation: 'ETFE',
  outsideDiameterMm: 0.5,
});

export const CONDUCTOR = 'silver-plated copper, solid';

/** Outside diameters are the shop's own measure, editable like everything here. */
export const DEMO_WIRES: readonly DemoWire[] = [
  ...['WH', 'GN', 'BK', 'VT', 'RD', 'BU', 'GY', 'YE'].map(thin),
  { gaugeAwg: 28, colour: 'YE', insulation: 'ETFE', outsideDiameterMm: 0.58 },
  { gaugeAwg: 26, colour: 'RD', insulation: 'PVDF', outsideDiameterMm: 0.68 },
  { gaugeAwg: 26, colour: 'BK', insulation: 'PVDF', outsideDiameterMm: 0.68 },
];

interface DemoSpool {
  label: string;
  gaugeAwg: number;
  colour: string;
  lengthM: number;
  place: string;
}

export const SHELF = 'wire shelf';

/** The first eight lie on the rigs, in bench order; the others wait on the shelf. */
export const DEMO_SPOOLS: readonly DemoSpool[] = [
  { label: 'S-0401', gaugeAwg: 28, colour: 'YE', lengthM: 150, place: '' },
  { label: 'S-0402', gaugeAwg: 30, colour: 'WH', lengthM: 305, place: '' },
  { label: 'S-0403', gaugeAwg: 30, colour: 'GN', lengthM: 305, place: '' },
  { label: 'S-0404', gaugeAwg: 30, colour: 'BK', lengthM: 305, place: '' },
  { label: 'S-0405', gaugeAwg: 30, colour: 'VT', lengthM: 100, place: '' },
  { label: 'S-0406', gaugeAwg: 30, colour: 'RD', lengthM: 250, place: '' },
  { label: 'S-0398', gaugeAwg: 30, colour: 'BU', lengthM: 150, place: '' },
  { label: 'S-0412', gaugeAwg: 30, colour: 'GY', lengthM: 61, place: '' },
  { label: 'S-0413', gaugeAwg: 30, colour: 'WH', lengthM: 305, place: SHELF },
  { label: 'S-0414', gaugeAwg: 30, colour: 'YE', lengthM: 100, place: SHELF },
  { label: 'S-0415', gaugeAwg: 26, colour: 'RD', lengthM: 100, place: SHELF },
];

export const BLADE_MODEL = 'side cutter, flush, 130 mm';
export const SPARE_BLADES = ['B-0109', 'B-0110'];

/** What tells the demo's wires apart. */
export function wireKey(wire: { gaugeAwg: number; colour: string }): string {
  return `${wire.colour} ${wire.gaugeAwg}`;
}
