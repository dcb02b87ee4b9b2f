/** Why a rig takes nothing now, the soonest to change first. */
export const BUSY_DOINGS = [
  'cutting',
  'tray full',
  'ready to start',
  'paused',
  'held',
  'work hold',
  'unsettled',
  'silent',
  'out of service',
] as const;
export type BusyDoing = (typeof BUSY_DOINGS)[number];

/** `freeAt`: when it is expected to be through; null when nobody can say. */
export interface BusyRig {
  doing: BusyDoing;
  freeAt: Date | null;
}

/** A lot that is on no rig, with what decides its turn and what it needs. */
export interface LotToGive {
  lotId: string;
  /** 1 is first. */
  priority: number;
  dueAt: Date | null;
  queuedAt: Date;
  /** Batch number, line and lot in one, so that equals keep their order. */
  order: readonly [batch: number, line: number, lot: number];
  wireId: string;
  /** As in `GN 30 AWG`. */
  wireName: string;
  lengthMm: number;
  pieces: number;
}

/** A rig with what is loaded; `busy` null: it can take a lot now. */
export interface RigToFill {
  rigId: string;
  name: string;
  benchOrder: number;
  wireId: string | null;
  spoolLeftMm: number;
  /** From the profile; null where a rig has none yet. */
  limits: { shortestPieceMm: number; longestPieceMm: number; trimMm: number } | null;
  busy: BusyRig | null;
}

/** Wire a lot takes from a rig's spool, in mm: its pieces and one trim. */
export function lotNeedsMm(lot: Pick<LotToGive, 'pieces' | 'lengthMm'>, trimMm: number): number {
  return lot.pieces * lot.lengthMm + trimMm;
}

/** Whether the rig's profile allows the length. A rig without a profile allows none. */
export function lengthFits(lot: LotToGive, { limits }: RigToFill): boolean {
  return limits !== null && lot.lengthMm >= limits.shortestPieceMm && lot.lengthMm <= limits.longestPieceMm;
}

/** Whether the rig's spool has enough for the whole lot. */
export function spoolFits(lot: LotToGive, rig: RigToFill): boolean {
  return rig.spoolLeftMm >= lotNeedsMm(lot, rig.limits?.trimMm ?? 0);
}
