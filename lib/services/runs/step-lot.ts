import { eq } from 'drizzle-orm';
import { lots } from '@/db/schema/batches';
import type { LotState } from '@/lib/fleet/lot';
import type { ServiceContext } from '../context';

/** The ways a lot walks to a state, one legal step after the other. */
const WAYS: Partial<Record<LotState, Partial<Record<LotState, readonly LotState[]>>>> = {
  given: { running: ['running'], cut: ['running', 'cut'], waiting: ['waiting'], withdrawn: ['withdrawn'] },
  running: { running: [], cut: ['cut'], waiting: ['cut', 'waiting'], withdrawn: ['cut', 'withdrawn'] },
  cut: { cut: [], bagged: ['bagged'], waiting: ['waiting'], withdrawn: ['withdrawn'] },
};

const OFF_RIG: readonly LotState[] = ['waiting', 'withdrawn'];

/**
 * Brings a lot to `target`, step by step as the database demands; part of the caller's transaction. A lot with no way
 * there stays as it is, and false is answered.
 */
export async function stepLot(
  ctx: ServiceContext,
  lot: { id: string; state: LotState },
  target: LotState,
  waitingReason = '',
): Promise<boolean> {
  const way = WAYS[lot.state]?.[target];
  if (!way) return false;
  for (const state of way) {
    const left = OFF_RIG.includes(state) ? { rigId: null, waitingReason } : {};
    await ctx.db
      .update(lots)
      .set({ state, ...left })
      .where(eq(lots.id, lot.id));
  }
  return true;
}
