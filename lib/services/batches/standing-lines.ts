import { asc, eq, sql } from 'drizzle-orm';
import { batchLines, lots } from '@/db/schema/batches';
import { runs } from '@/db/schema/runs';
import type { LotState } from '@/lib/fleet/lot';
import type { WaitingLot } from '@/lib/plan/adjust-lots';
import type { StandingLine } from '@/lib/plan/line-changes';
import type { ServiceContext } from '../context';

/** A line as a change finds it; its lots are locked until the transaction ends. */
export interface LockedLine extends StandingLine {
  waiting: WaitingLot[];
  /** Any lot of it, whatever its state, is history and keeps the line. */
  hasHistory: boolean;
  lastLotNumber: number;
}

const COMMITTED: readonly LotState[] = ['given', 'running', 'cut', 'bagged'];

function lotsOf(ctx: ServiceContext, batchId: string) {
  return ctx.db
    .select({
      id: lots.id,
      lineId: lots.lineId,
      number: lots.number,
      pieces: lots.pieces,
      state: lots.state,
      wasOnRig: sql<boolean>`exists (select 1 from ${runs} where ${runs.lotId} = ${lots.id})`,
    })
    .from(lots)
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .where(eq(batchLines.batchId, batchId))
    .orderBy(asc(lots.id))
    .for('update', { of: lots });
}

/** All lines of a batch by id, in order, with what of them is cut, on rigs and waiting. */
export async function lockLines(ctx: ServiceContext, batchId: string): Promise<Map<string, LockedLine>> {
  const itsLots = await lotsOf(ctx, batchId);
  const rows = await ctx.db
    .select()
    .from(batchLines)
    .where(eq(batchLines.batchId, batchId))
    .orderBy(asc(batchLines.position));
  return new Map(
    rows.map((line) => {
      const own = itsLots.filter((lot) => lot.lineId === line.id);
      const committed = own.filter((lot) => COMMITTED.includes(lot.state));
      return [
        line.id,
        {
          id: line.id,
          label: line.label,
          wireId: line.wireId,
          lengthMm: line.lengthMm,
          toleranceMinusMm: line.toleranceMinusMm,
          tolerancePlusMm: line.tolerancePlusMm,
          committed: committed.reduce((sum, lot) => sum + lot.pieces, 0),
          waiting: own.filter((lot) => lot.state === 'waiting'),
          hasHistory: own.some((lot) => lot.state !== 'waiting' || lot.wasOnRig),
          lastLotNumber: Math.max(0, ...own.map((lot) => lot.number)),
        },
      ];
    }),
  );
}
