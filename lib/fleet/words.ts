import type { HoldReason } from './run';
import type { RigState } from './rig-state';

/** What each state is called on a screen, and what it means for the person who reads it. */
export const STATE_WORDS: Record<RigState, { title: string; sentence: string }> = {
  ready: { title: 'Ready', sentence: 'It stands still and can take a lot.' },
  cutting: { title: 'Cutting', sentence: 'Keep hands away from the jaws and the feed wheel.' },
  paused: {
    title: 'Paused',
    sentence: 'It waits at standby. It moves again only when somebody here says so.',
  },
  held: { title: 'Held', sentence: 'It has a question. Nothing moves until somebody answers it here.' },
  blocked: { title: 'Blocked', sentence: 'An interlock is open. Close it, then go on at the rig.' },
  'work hold': {
    title: 'Somebody works on it',
    sentence: 'Hands are in the rig. Only that person can end this.',
  },
  'tray full': { title: 'Tray full', sentence: 'The run is over. Empty the tray and confirm the bag.' },
  silent: { title: 'Silent', sentence: 'It is not heard. It may still be moving: go and look.' },
  'out of service': { title: 'Out of service', sentence: 'It takes no work until a maintainer returns it.' },
};

/** Each hold as a short name, what happened, and what to bring or do. */
export const HOLD_WORDS: Record<HoldReason, { title: string; happened: string; bring: string }> = {
  'first-pieces': {
    title: 'first pieces',
    happened: 'the first pieces are cut, measure them',
    bring: 'stop block and rule',
  },
  misfeed: { title: 'misfeed', happened: 'a piece went wrong', bring: 'pliers' },
  doubt: {
    title: 'a piece in doubt',
    happened: 'one cut was commanded and never confirmed',
    bring: 'look past the jaws and into the tray',
  },
  'guard-open': {
    title: 'guard opened',
    happened: 'the guard was opened',
    bring: 'go and look; nothing moves until you say so at the rig',
  },
  'wire-missing': {
    title: 'no wire',
    happened: 'there is no wire at the guide',
    bring: 'a spool of the same wire',
  },
  'heater-warm': {
    title: 'heater warm',
    happened: 'a heater is on or warm',
    bring: 'switch the rig off at the plug and let it cool',
  },
  'firmware-refused': {
    title: 'a move was refused',
    happened: 'the rig refused a move',
    bring: 'look at the wire’s end',
  },
  'firmware-reset': {
    title: 'the rig restarted',
    happened: 'the rig’s board started anew',
    bring: 'look at plug and cable; it will home and trim',
  },
  'firmware-halted': {
    title: 'the rig halted',
    happened: 'the rig’s board halted itself',
    bring: 'switch the rig off and on',
  },
  'link-lost': {
    title: 'cable',
    happened: 'the agent lost the rig',
    bring: 'look at the USB cable and the plug',
  },
  'register-foreign': {
    title: 'not this run',
    happened: 'the rig remembers another run',
    bring: 'look whether two rigs’ cables are swapped; else ask a maintainer',
  },
  'agent-restarted': {
    title: 'agent restarted',
    happened: 'the agent started anew; the count is settled',
    bring: 'go on at the rig',
  },
  'work-hold': {
    title: 'after work on it',
    happened: 'somebody worked on it',
    bring: 'it will home, trim and cut first pieces',
  },
  'steppers-released': {
    title: 'let go',
    happened: 'it paused so long that the motors let go',
    bring: 'it will home and trim',
  },
  'position-wrong': {
    title: 'position',
    happened: 'feed or jaws are not where they must be',
    bring: 'look for a jam; a maintainer if it repeats',
  },
  'journal-damaged': {
    title: 'agent’s journal',
    happened: 'the agent’s own record is damaged',
    bring: 'count the tray; tell the owner',
  },
};
