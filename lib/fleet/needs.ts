import type { RigDto } from '@/lib/schemas/floor';
import { lotName } from './lot-name';
import { HOLD_WORDS } from './words';

/** Who must go where, with what in hand. `mark` says how it is drawn: what is normal is not hatched. `rank` 1 comes first. */
export interface Need {
  rigId: string;
  rigName: string;
  happened: string;
  bring: string;
  mark: 'danger' | 'abnormal' | 'normal';
  rank: number;
  sinceAt: string;
}

type Wanted = Omit<Need, 'rigId' | 'rigName' | 'sinceAt'> & { sinceAt: string | null };

function heldNeed(rig: RigDto): Wanted | null {
  const run = rig.run;
  if (!run || run.state !== 'held' || !run.holdReason) return null;
  const words = HOLD_WORDS[run.holdReason];
  const urgent = run.holdReason === 'guard-open' || run.holdReason === 'heater-warm';
  const at = run.holdReason === 'first-pieces' ? '' : ` at piece ${Math.min(run.cut + 1, run.pieces)}`;
  const happened =
    run.holdReason === 'first-pieces'
      ? `${run.piecesToMeasure.length} pieces cut, measure them before the other ${run.pieces - run.cut}`
      : `${words.happened}${at}`;
  return {
    happened,
    bring: words.bring,
    mark: urgent ? 'danger' : 'abnormal',
    rank: urgent ? 1 : 2,
    sinceAt: run.stateSince,
  };
}

function wantOf(rig: RigDto): Wanted | null {
  switch (rig.state) {
    case 'silent':
      return rig.run && rig.run.state !== 'prepared'
        ? {
            happened: 'not heard; it may still be moving',
            bring: 'go and look',
            mark: 'danger',
            rank: 1,
            sinceAt: rig.heardAt,
          }
        : null;
    case 'blocked':
      return rig.run
        ? {
            happened: 'the guard is open',
            bring: 'go and look; nothing moves until you say so at the rig',
            mark: 'danger',
            rank: 1,
            sinceAt: rig.run.stateSince,
          }
        : null;
    case 'held':
      return heldNeed(rig);
    case 'tray full':
      return rig.run
        ? {
            happened: `run over, ${rig.run.bagged} pieces in the tray`,
            bring: 'a bag and a label',
            mark: 'abnormal',
            rank: 3,
            sinceAt: rig.run.endedAt,
          }
        : null;
    case 'paused':
      return rig.run
        ? {
            happened: `paused at piece ${rig.run.cut}`,
            bring: 'go on at the rig',
            mark: 'normal',
            rank: 4,
            sinceAt: rig.run.stateSince,
          }
        : null;
    case 'ready':
      return rig.run?.programHeld
        ? {
            happened: `${lotName(rig.run)} is ready to start`,
            bring: 'read the notes and start it',
            mark: 'normal',
            rank: 5,
            sinceAt: null,
          }
        : null;
    default:
      return null;
  }
}

/** The needs of all rigs, the most urgent first, then in bench order. */
export function needsOf(rigs: readonly RigDto[]): Need[] {
  return rigs
    .flatMap((rig) => {
      const want = wantOf(rig);
      return want
        ? [
            {
              ...want,
              rigId: rig.id,
              rigName: rig.name,
              sinceAt: want.sinceAt ?? rig.at,
              bench: rig.benchOrder,
            },
          ]
        : [];
    })
    .sort((a, b) => a.rank - b.rank || a.bench - b.bench)
    .map(({ bench: _bench, ...need }) => need);
}
