import { workshop } from '@/db/schema/workshop';
import { workshopSchema, type WorkshopDto } from '@/lib/schemas/setup-workshop';
import type { ServiceContext } from '../context';

/** What holds until an owner says otherwise; the same as the table's own defaults. */
export const WORKSHOP_DEFAULTS: WorkshopDto = {
  name: 'Workshop',
  timeZone: 'Europe/Vienna',
  shiftStarts: ['06:00', '14:00', '22:00'],
  firstPieces: 5,
  lotPiecesMost: 400,
  toleranceMinusMm: 0,
  tolerancePlusMm: 3,
};

/** The workshop's settings; its name stands on every page, so anybody may read them. */
export async function readWorkshop({ ctx }: { ctx: ServiceContext }): Promise<WorkshopDto> {
  const [row] = await ctx.db.select().from(workshop);
  return row ? workshopSchema.parse(row) : WORKSHOP_DEFAULTS;
}
