import type { Dialect } from './dialect';
import { readReply, type Reply } from './reply';

const SWITCH = /\b([a-z]\d?_(?:min|max|probe)|z_probe|filament\d?):\s*([HL])(?=\s|$)/g;

/** `endstops hit: x_min:L z_min:H`: all switches on one line, H for pressed. */
function readSwitches(text: string): Reply | null {
  if (!/^endstops hit:/i.test(text)) return null;
  const told = [...text.matchAll(SWITCH)].map(([, name = '', level]) => ({ name, triggered: level === 'H' }));
  return told.length > 0 ? { text, kind: 'switches', told } : null;
}

/** Reads one line: what only this family says first, then what it shares with the main family. */
export function readRepetierReply(text: string): Reply {
  const ok = /^ok (\d+)\s*$/.exec(text);
  if (ok) return { text, kind: 'ok', line: Number(ok[1]), temperature: null };
  const skip = /^skip (\d+)\s*$/.exec(text);
  if (skip) return { text, kind: 'skip', line: Number(skip[1]) };
  if (/^fatal:/i.test(text)) return { text, kind: 'halted' };
  const expected = /^Error:expected line (\d+) got \d+\s*$/i.exec(text);
  if (expected) return { text, kind: 'error', lastLine: Number(expected[1]) - 1 };
  return readSwitches(text) ?? readReply(text);
}

/** Settings that the family does not know and does not need: it has no soft end stop below zero. */
const NOT_NEEDED: ReadonlySet<string> = new Set(['M211 S0']);

/**
 * Repetier: an ok says that a line was received. That motion has ended, and what the register shows, is proved by the
 * answer of an `M114` behind it, for lines are carried out in their order; `G92` itself answers with no position.
 */
export const repetier: Dialect = {
  name: 'Repetier',
  longestFeedUnits: 160,
  numbersModulo: 65_536,
  acksOnReceipt: true,
  read: readRepetierReply,
  linesOf(command, needs) {
    if (NOT_NEEDED.has(command)) return [];
    const unproved = command === 'M400' || (needs === 'position' && command !== 'M114');
    return unproved ? [command, 'M114'] : [command];
  },
};
