import type { spools, wires } from '@/db/schema/stock';
import type { SpoolDto } from '@/lib/schemas/stock';
import { wireDto } from '../wires/wire-dto';

interface SpoolRow {
  spool: typeof spools.$inferSelect;
  wire: typeof wires.$inferSelect;
  rigName: string | null;
}

/** A spool's row, its wire's and the name of the rig it is on, as it is answered. Never less than nothing is left. */
export function spoolDto({ spool, wire, rigName }: SpoolRow): SpoolDto {
  return {
    id: spool.id,
    label: spool.label,
    wire: wireDto(wire),
    lengthMm: spool.lengthMm,
    leftMm: Math.max(0, spool.lengthMm - spool.usedMm),
    place: spool.place,
    rigName,
  };
}
