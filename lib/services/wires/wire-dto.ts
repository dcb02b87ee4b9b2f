import type { wires } from '@/db/schema/stock';
import type { WireDto } from '@/lib/schemas/stock';

/** A wire's row as it is answered. */
export function wireDto(row: typeof wires.$inferSelect): WireDto {
  return {
    id: row.id,
    gaugeAwg: row.gaugeAwg,
    conductor: row.conductor,
    insulation: row.insulation,
    colour: row.colour,
    outsideDiameterMm: row.outsideDiameterMm,
  };
}
