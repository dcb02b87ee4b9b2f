import { and, eq, gt, isNull, type SQL } from 'drizzle-orm';
import { batches, batchLines, lots } from '@/db/schema/batches';
import { wires } from '@/db/schema/stock';
import type { LotToGive } from '@/lib/plan/work';
import { wireName } from '@/lib/wire/name';
import type { ServiceContext } from '../context';

/** A waiting lot with its batch and the reason it was last told to wait for. */
export interface WaitingLotRow extends LotToGive {
  batchId: string;
  waitingReason: string;
}

/** Lots that wait for a rig, of batches that are not withdrawn. */
export async function selectLotsToGive(ctx: ServiceContext, which?: SQL): Promise<WaitingLotRow[]> {
  const rows = await ctx.db
    .select({ lot: lots, line: batchLines, batch: batches, wire: wires })
    .from(lots)
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(batches, eq(batches.id, batchLines.batchId))
    .innerJoin(wires, eq(wires.id, batchLines.wireId))
    .where(and(eq(lots.state, 'waiting'), gt(lots.pieces, 0), isNull(batches.withdrawnAt), which));
  return rows.map(({ lot, line, batch, wire }) => ({
    lotId: lot.id,
    batchId: batch.id,
    priority: batch.priority,
    dueAt: batch.dueAt,
    queuedAt: lot.queuedAt,
    order: [batch.number, line.position, lot.number],
    wireId: wire.id,
    wireName: wireName(wire),
    lengthMm: line.lengthMm,
    pieces: lot.pieces,
    waitingReason: lot.waitingReason,
  }));
}
