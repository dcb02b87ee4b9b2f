import type { RigDto } from '@/lib/schemas/floor';
import { alarmWords } from './alarm-words';
import { lotName } from './lot-name';

/**
 * Who must go where, with what in hand. `alarm` is the standing alarm behind it, with the name of whoever is on it;
 * null for what merely can be done. `mark` says how it is drawn: what is normal is not hatched.
 */
export interface Need {
  key: string;
  rigId: string;
  rigName: string;
  happened: string;
  bring: string;
  mark: 'danger' | 'abnormal' | 'normal';
  sinceAt: string;
  alarm: { id: string; byName: string | null } | null;
}

interface Ranked {
  need: Need;
  rank: number;
  bench: number;
}

const RANK_OF_PAUSED = 4;
const RANK_OF_READY = 5;

function alarmNeeds(rig: RigDto): Ranked[] {
  return rig.alarms.map((alarm) => ({
    rank: alarm.priority,
    bench: rig.benchOrder,
    need: {
      key: alarm.id,
      rigId: rig.id,
      rigName: rig.name,
      ...alarmWords(alarm, rig),
      mark: alarm.priority === 1 ? 'danger' : 'abnormal',
      sinceAt: alarm.raisedAt,
      alarm: { id: alarm.id, byName: alarm.acknowledgedByName },
    },
  }));
}

function chance(rig: RigDto, rank: number, happened: string, bring: string, sinceAt: string): Ranked[] {
  const need: Need = {
    key: `${rig.id} ${rank}`,
    rigId: rig.id,
    rigName: rig.name,
    happened,
    bring,
    mark: 'normal',
    sinceAt,
    alarm: null,
  };
  return [{ rank, bench: rig.benchOrder, need }];
}

/** What is no alarm and waits for a person all the same: a pause, a lot that can start. */
function chances(rig: RigDto): Ranked[] {
  const { run, state } = rig;
  if (!run) return [];
  if (state === 'paused') {
    return chance(rig, RANK_OF_PAUSED, `paused at piece ${run.cut}`, 'go on at the rig', run.stateSince);
  }
  if (state === 'ready' && run.state === 'prepared' && run.programHeld) {
    return chance(
      rig,
      RANK_OF_READY,
      `${lotName(run)} is ready to start`,
      'read the notes and start it',
      run.stateSince,
    );
  }
  return [];
}

/** The needs of all rigs: alarms by priority, then what can be done; within these in bench order. */
export function needsOf(rigs: readonly RigDto[]): Need[] {
  return rigs
    .flatMap((rig) => [...alarmNeeds(rig), ...chances(rig)])
    .sort((a, b) => a.rank - b.rank || a.bench - b.bench)
    .map(({ need }) => need);
}
