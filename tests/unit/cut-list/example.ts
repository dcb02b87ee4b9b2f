import type { WireDto } from '@/lib/schemas/stock';
import type { CutListKnowledge } from '@/lib/wire/cut-list/reading';

function wire(index: number, gaugeAwg: number, insulation: string, colour: string): WireDto {
  const id = `00000000-0000-4000-8000-${String(index).padStart(12, '0')}`;
  return { id, gaugeAwg, conductor: 'silver-plated copper', insulation, colour, outsideDiameterMm: 0.5 };
}

export const GREEN_30 = wire(1, 30, 'ETFE', 'GN');
export const WHITE_28 = wire(2, 28, 'PVDF', 'WH');
export const EARTH_26 = wire(3, 26, 'ETFE', 'GNYE');

/** A workshop with three wires that takes −0/+3 mm for granted. */
export const KNOWN: CutListKnowledge = {
  wires: [GREEN_30, WHITE_28, EARTH_26],
  defaults: { toleranceMinusMm: 0, tolerancePlusMm: 3 },
};

export const HEADER = 'label,length_mm,pieces,gauge_awg,insulation,colour';

export const bytesOf = (text: string): Uint8Array => new TextEncoder().encode(text);
