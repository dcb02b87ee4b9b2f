import { and, between, desc, eq } from 'drizzle-orm';
import { measurements, type runs } from '@/db/schema/runs';
import type { ServiceContext } from '../context';

/** The newest measurement of each of the pieces `from` to `through`, by piece. */
export async function newestMeasurements(ctx: ServiceContext, runId: string, from: number, through: number) {
  const rows = await ctx.db
    .selectDistinctOn([measurements.piece], {
      piece: measurements.piece,
      withinTolerance: measurements.withinTolerance,
    })
    .from(measurements)
    .where(and(eq(measurements.runId, runId), between(measurements.piece, from, through)))
    .orderBy(measurements.piece, desc(measurements.id));
  return new Map(rows.map((row) => [row.piece, row.withinTolerance]));
}

/** Whether the latest first pieces, measured just now, hold one that is out of tolerance. */
export async function firstPiecesFailed(
  ctx: ServiceContext,
  run: Pick<typeof runs.$inferSelect, 'id' | 'cut' | 'firstPieces' | 'measuredThrough'>,
): Promise<boolean> {
  if (run.cut === 0 || run.measuredThrough < run.cut) return false;
  const newest = await newestMeasurements(ctx, run.id, run.cut - run.firstPieces + 1, run.cut);
  return [...newest.values()].includes(false);
}
