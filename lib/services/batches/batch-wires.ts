import { and, eq, gt, inArray } from 'drizzle-orm';
import { batchLines } from '@/db/schema/batches';
import { wires } from '@/db/schema/stock';
import type { BatchSummaryDto } from '@/lib/schemas/batches';
import type { WireDto } from '@/lib/schemas/stock';
import type { ServiceContext } from '../context';
import { wireDto } from '../wires/wire-dto';
import type { BatchRow } from './batch-rows';

/** The wires that each of the batches needs, by batch, thickest first. */
export async function wiresOfBatches(
  ctx: ServiceContext,
  batchIds: string[],
): Promise<Map<string, WireDto[]>> {
  const found = new Map<string, WireDto[]>();
  if (batchIds.length === 0) return found;
  const rows = await ctx.db
    .selectDistinct({ batchId: batchLines.batchId, wire: wires })
    .from(batchLines)
    .innerJoin(wires, eq(wires.id, batchLines.wireId))
    .where(and(inArray(batchLines.batchId, batchIds), gt(batchLines.pieces, 0)))
    .orderBy(wires.gaugeAwg, wires.colour);
  for (const { batchId, wire } of rows) {
    found.set(batchId, [...(found.get(batchId) ?? []), wireDto(wire)]);
  }
  return found;
}

/** A batch's row as the list answers it. */
export function batchSummary(row: BatchRow, itsWires: WireDto[]): BatchSummaryDto {
  return {
    id: row.id,
    number: row.number,
    name: row.name,
    state: row.state,
    dueAt: row.dueAt?.toISOString() ?? null,
    priority: row.priority,
    lines: row.lines,
    pieces: row.pieces,
    cut: row.cut,
    bagged: row.bagged,
    wires: itsWires,
    createdAt: row.createdAt.toISOString(),
    waitingReason: row.state === 'withdrawn' ? '' : row.waitingReason,
  };
}
