import { eq, type SQL } from 'drizzle-orm';
import { batches, batchLines, lots } from '@/db/schema/batches';
import { people } from '@/db/schema/people';
import { rigs } from '@/db/schema/rigs';
import { bags, runs } from '@/db/schema/runs';
import { blades, spools, wires } from '@/db/schema/stock';
import type { BagDto } from '@/lib/schemas/run';
import type { ServiceContext } from '../context';
import { wireDto } from '../wires/wire-dto';

/** A run with all that its label says; `bag` is null until the tray is cleared. */
export async function selectBagRow(ctx: ServiceContext, where: SQL) {
  const [found] = await ctx.db
    .select({
      bag: bags,
      run: runs,
      lot: lots,
      line: batchLines,
      batch: batches,
      wire: wires,
      rigName: rigs.name,
      bladeLabel: blades.label,
      spoolLabel: spools.label,
      clearedByName: people.name,
    })
    .from(runs)
    .innerJoin(lots, eq(lots.id, runs.lotId))
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(batches, eq(batches.id, batchLines.batchId))
    .innerJoin(wires, eq(wires.id, runs.wireId))
    .innerJoin(rigs, eq(rigs.id, runs.rigId))
    .leftJoin(bags, eq(bags.runId, runs.id))
    .leftJoin(people, eq(people.id, bags.clearedBy))
    .leftJoin(blades, eq(blades.id, runs.bladeId))
    .leftJoin(spools, eq(spools.id, runs.spoolId))
    .where(where);
  return found;
}

export type BagRow = NonNullable<Awaited<ReturnType<typeof selectBagRow>>>;

/** What a label says, with what only the bag or its making knows. */
export function bagDto(
  { run, lot, line, batch, wire, rigName, bladeLabel, spoolLabel }: BagRow,
  own: Pick<BagDto, 'code' | 'pieces' | 'clearedByName' | 'clearedAt'>,
): BagDto {
  return {
    runId: run.id,
    batchName: batch.name,
    batchNumber: batch.number,
    lotNumber: lot.number,
    lineLabel: line.label,
    wire: wireDto(wire),
    lengthMm: run.lengthMm,
    toleranceMinusMm: line.toleranceMinusMm,
    tolerancePlusMm: line.tolerancePlusMm,
    rigName,
    bladeLabel,
    spoolLabel,
    ...own,
  };
}

/** The bag of the row as it was confirmed; null while it is not. */
export function confirmedBag(row: BagRow | undefined): BagDto | null {
  if (!row?.bag) return null;
  const { code, pieces, clearedAt } = row.bag;
  return bagDto(row, {
    code,
    pieces,
    clearedByName: row.clearedByName ?? '',
    clearedAt: clearedAt.toISOString(),
  });
}
