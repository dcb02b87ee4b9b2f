import { asc, eq } from 'drizzle-orm';
import { batches, batchLines } from '@/db/schema/batches';
import { people } from '@/db/schema/people';
import { wires } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { type BatchDto, type BatchLineDto, type LotDto, oneBatchSchema } from '@/lib/schemas/batches';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { selectLots } from '../lots/lot-rows';
import { parseInput } from '../parse';
import { wireDto } from '../wires/wire-dto';
import { batchRows } from './batch-rows';
import { batchSummary, wiresOfBatches } from './batch-wires';

async function lineDtos(ctx: ServiceContext, batchId: string): Promise<BatchLineDto[]> {
  const rows = await ctx.db
    .select({ line: batchLines, wire: wires })
    .from(batchLines)
    .innerJoin(wires, eq(wires.id, batchLines.wireId))
    .where(eq(batchLines.batchId, batchId))
    .orderBy(asc(batchLines.position));
  const itsLots = new Map<string, LotDto[]>();
  for (const lot of await selectLots(ctx, eq(batchLines.batchId, batchId))) {
    itsLots.set(lot.lineId, [...(itsLots.get(lot.lineId) ?? []), lot]);
  }
  return rows.map(({ line, wire }) => lineDto(line, wireDto(wire), itsLots.get(line.id) ?? []));
}

function lineDto(
  line: typeof batchLines.$inferSelect,
  wire: BatchLineDto['wire'],
  lots: LotDto[],
): BatchLineDto {
  return {
    id: line.id,
    position: line.position,
    label: line.label,
    wire,
    lengthMm: line.lengthMm,
    toleranceMinusMm: line.toleranceMinusMm,
    tolerancePlusMm: line.tolerancePlusMm,
    pieces: line.pieces,
    cut: lots.reduce((sum, lot) => sum + lot.cut, 0),
    bagged: lots.reduce((sum, lot) => sum + (lot.bagged ?? 0), 0),
    lots: lots.filter((lot) => lot.pieces > 0 || lot.cut > 0),
  };
}

/** One batch with its lines and lots. Lines that were taken out show only when something of them is cut. */
export async function readBatch({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<BatchDto> {
  authorise(ctx, 'batches.read');
  const { batchId } = parseInput(oneBatchSchema, input);
  const [row] = await batchRows(ctx.db).query.where(eq(batches.id, batchId));
  if (!row) throw new EllwandError('not-found');
  const [author] = await ctx.db
    .select({ name: people.name })
    .from(people)
    .where(eq(people.id, row.createdBy));
  const wiresOf = await wiresOfBatches(ctx, [batchId]);
  const lines = await lineDtos(ctx, batchId);
  return {
    ...batchSummary(row, wiresOf.get(batchId) ?? []),
    revision: row.revision,
    sourceName: row.sourceName,
    createdByName: author?.name ?? '',
    lineList: lines.filter((line) => line.pieces > 0 || line.cut > 0),
  };
}
