import type { blades } from '@/db/schema/stock';
import type { BladeDto } from '@/lib/schemas/stock';

/** A blade's row as it is answered. */
export function bladeDto(row: typeof blades.$inferSelect): BladeDto {
  return {
    id: row.id,
    label: row.label,
    model: row.model,
    cuts: row.cuts,
    rigId: row.rigId,
    fittedAt: row.fittedAt?.toISOString() ?? null,
  };
}
