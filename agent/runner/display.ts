import type { RigState, RunMode } from './state';

/** No letter N in any of them: old builds read it as a line number wherever it stands. */
const WORDS: Record<RunMode, string> = {
  holding: 'READY',
  moving: 'CUTS',
  settling: 'CUTS',
  paused: 'PAUSED',
  held: 'HELD',
  ended: 'TRAY',
};

/** What the rig's display must read: the code while one is asked for, else what the rig does; null: leave it alone. */
export function displayText({ presence, run, displayShown }: RigState): string | null {
  if (presence) return `CODE ${presence.code}`;
  if (run && run.mode !== 'holding') return WORDS[run.mode];
  // Nobody has used the display yet: it keeps what its maker shows.
  return displayShown === null ? null : WORDS.holding;
}
