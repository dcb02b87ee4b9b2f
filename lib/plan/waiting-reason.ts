import { spokenMm } from '@/lib/wire/length';
import {
  BUSY_DOINGS,
  type BusyDoing,
  lengthFits,
  lotNeedsMm,
  type LotToGive,
  type RigToFill,
  spoolFits,
} from './work';

/** What the rig is doing, to follow "has GN 30 AWG loaded but". */
const DOING_WORDS: Record<BusyDoing, string> = {
  cutting: 'is cutting',
  'tray full': 'its tray is to be emptied first',
  'ready to start': 'has another lot to start first',
  paused: 'is paused in another lot',
  held: 'is held with a question in another lot',
  'work hold': 'somebody works on it',
  unsettled: 'its agent still holds earlier work',
  silent: 'is not heard',
  'out of service': 'is out of service',
};

function compareBusy(a: RigToFill, b: RigToFill): number {
  const rank = (rig: RigToFill): number => (rig.busy === null ? -1 : BUSY_DOINGS.indexOf(rig.busy.doing));
  const freeAt = (rig: RigToFill): number => rig.busy?.freeAt?.getTime() ?? Number.MAX_SAFE_INTEGER;
  return rank(a) - rank(b) || freeAt(a) - freeAt(b) || a.benchOrder - b.benchOrder;
}

function metres(mm: number): string {
  return `${(Math.floor(mm / 100) / 10).toFixed(1)} m`;
}

/** Rounded up, so that "needs 12.0 m" is never said of a spool with 12.0 m left. */
function metresUp(mm: number): string {
  return `${(Math.ceil(mm / 100) / 10).toFixed(1)} m`;
}

/** Said when no rig with the wire allows the length. */
function ofLength(lot: LotToGive, rigs: readonly RigToFill[]): string {
  const limited = rigs.flatMap(({ name, limits }) => (limits === null ? [] : [{ name, ...limits }]));
  const [first, ...others] = limited;
  if (!first) return `${rigs[0]?.name ?? 'The rig'} has ${lot.wireName} loaded but no profile yet.`;
  if (lot.lengthMm > first.longestPieceMm) {
    const best = others.reduce((a, b) => (b.longestPieceMm > a.longestPieceMm ? b : a), first);
    return `${spokenMm(lot.lengthMm)} is too long: ${best.name} cuts at most ${spokenMm(best.longestPieceMm)}.`;
  }
  const best = others.reduce((a, b) => (b.shortestPieceMm < a.shortestPieceMm ? b : a), first);
  return `${spokenMm(lot.lengthMm)} is too short: ${best.name} cuts at least ${spokenMm(best.shortestPieceMm)}.`;
}

/** Said when every rig that could cut the length has too little wire: the fullest one is named. */
function ofSpool(lot: LotToGive, rigs: readonly RigToFill[]): string {
  const fullest = rigs.toSorted((a, b) => b.spoolLeftMm - a.spoolLeftMm)[0];
  if (!fullest) return '';
  const left = metres(fullest.spoolLeftMm);
  const needed = metresUp(lotNeedsMm(lot, fullest.limits?.trimMm ?? 0));
  return `${fullest.name} has ${lot.wireName} loaded, but ${left} are left and this lot needs ${needed}.`;
}

function ofBusy(lot: LotToGive, rigs: readonly RigToFill[], spokenTime: (at: Date) => string): string {
  const soonest = rigs.toSorted(compareBusy)[0];
  if (!soonest?.busy) return '';
  const { doing, freeAt } = soonest.busy;
  const until = doing === 'cutting' && freeAt !== null ? ` until about ${spokenTime(freeAt)}` : '';
  return `${soonest.name} has ${lot.wireName} loaded but ${DOING_WORDS[doing]}${until}.`;
}

/** One sentence on why a lot waits: no wire, no fitting rig, too little wire, or the rig that comes free first. */
export function waitingReason(
  lot: LotToGive,
  rigs: readonly RigToFill[],
  spokenTime: (at: Date) => string,
): string {
  const loaded = rigs.filter((rig) => rig.wireId === lot.wireId);
  if (loaded.length === 0) return `No rig has ${lot.wireName} loaded.`;
  const able = loaded.filter((rig) => lengthFits(lot, rig));
  if (able.length === 0) return ofLength(lot, loaded);
  const enough = able.filter((rig) => spoolFits(lot, rig));
  return enough.length === 0 ? ofSpool(lot, able) : ofBusy(lot, enough, spokenTime);
}
