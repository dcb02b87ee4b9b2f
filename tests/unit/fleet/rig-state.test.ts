import { describe, expect, it } from 'vitest';
import { rigState, SILENT_AFTER_MS, type RigFacts } from '@/lib/fleet/rig-state';

const standing: RigFacts = {
  outOfService: false,
  workHold: false,
  heardAgoMs: 500,
  connected: true,
  guard: 'closed',
  runState: null,
};

describe('the one word for a rig', () => {
  it.each<[string, Partial<RigFacts>, string]>([
    ['heard and idle', {}, 'ready'],
    ['a prepared run moves nothing yet', { runState: 'prepared' }, 'ready'],
    ['a run that cuts', { runState: 'cutting' }, 'cutting'],
    ['a pause', { runState: 'paused' }, 'paused'],
    ['a question', { runState: 'held' }, 'held'],
    ['a finished run until its tray is cleared', { runState: 'ended' }, 'tray full'],
    ['an open guard comes before what the run says', { runState: 'cutting', guard: 'open' }, 'blocked'],
    ['hands in the rig come before an open guard', { workHold: true, guard: 'open' }, 'work hold'],
    [
      'the last heard moment that still counts',
      { heardAgoMs: SILENT_AFTER_MS, runState: 'cutting' },
      'cutting',
    ],
    [
      'one ms later it is not said to be cutting',
      { heardAgoMs: SILENT_AFTER_MS + 1, runState: 'cutting' },
      'silent',
    ],
    ['never heard', { heardAgoMs: null }, 'silent'],
    ['an agent without the port open', { connected: false, runState: 'cutting' }, 'silent'],
    ['silence comes before a work hold', { workHold: true, heardAgoMs: null }, 'silent'],
    ['out of service comes first', { outOfService: true, heardAgoMs: null }, 'out of service'],
  ])('%s', (_title, facts, word) => {
    expect(rigState({ ...standing, ...facts })).toBe(word);
  });
});
