import { inArray, max } from 'drizzle-orm';
import { spools } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { lotPiecesMost, splitPieces } from '@/lib/plan/split-lots';
import type { ServiceContext } from '../context';
import { readWorkshop } from '../workshop/read-workshop';

/** Trims of a run that goes badly; a lot is made no larger than a full spool less this. */
const TRIMS_ALLOWED_MM = 500;
/** More lots than this are a slip in the settings, not an order. */
const LOTS_MOST = 20_000;

export interface LineToSplit {
  wireId: string;
  lengthMm: number;
  pieces: number;
}

async function fullSpools(ctx: ServiceContext, wireIds: string[]): Promise<Map<string, number>> {
  const rows = await ctx.db
    .select({ wireId: spools.wireId, lengthMm: max(spools.lengthMm) })
    .from(spools)
    .where(inArray(spools.wireId, wireIds))
    .groupBy(spools.wireId);
  return new Map(rows.map(({ wireId, lengthMm }) => [wireId, Number(lengthMm ?? 0)]));
}

/**
 * How many pieces each lot of each line gets, in the lines' order: even lots, within the workshop's most, the register
 * and the longest spool of the wire that was ever in stock.
 * @throws EllwandError `bad-input` when the workshop's most would make more lots than anybody can run.
 */
export async function lotSizes(ctx: ServiceContext, lines: readonly LineToSplit[]): Promise<number[][]> {
  if (lines.length === 0) return [];
  const { lotPiecesMost: workshopMost } = await readWorkshop({ ctx });
  const longest = await fullSpools(ctx, [...new Set(lines.map(({ wireId }) => wireId))]);
  const limits = lines.map((line) =>
    lotPiecesMost({
      workshopMost,
      lengthMm: line.lengthMm,
      longestSpoolMm: longest.get(line.wireId) ?? null,
      trimMm: TRIMS_ALLOWED_MM,
    }),
  );
  const count = lines.reduce((sum, line, index) => sum + Math.ceil(line.pieces / (limits[index] ?? 1)), 0);
  if (count > LOTS_MOST) {
    const message = `That makes ${count} lots. Let a lot have more pieces, in set-up.`;
    throw new EllwandError('bad-input', { fields: [{ path: 'lines', message }] });
  }
  return lines.map((line, index) => splitPieces(line.pieces, limits[index] ?? 1));
}
