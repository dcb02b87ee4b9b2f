import type { Profile } from '../profile';
import type { SourceLine } from './lex';

/** What a line asks of a rig with this profile. A line with any other meaning is refused. */
export type Meaning =
  | { is: 'setting' }
  | { is: 'home' }
  | { is: 'declare'; cutAxisMm: number }
  | { is: 'zero-feed' }
  | { is: 'register'; register: number }
  | { is: 'feed'; feedTo: number; unitsPerMin: number }
  | { is: 'press'; cutAxisMm: number; mmPerMin: number }
  | { is: 'await' }
  | { is: 'ask' };

export type Command = Extract<SourceLine, { is: 'command' }>;

/** Settings are known by their whole text: `M302 S0` and `M302 P1` are not the same wish. */
const SETTINGS: ReadonlySet<string> = new Set([
  'M302 P1',
  'M84 S0',
  'M211 S0',
  'M412 H1',
  'M75',
  'M77',
  'G90',
  'M82',
]);

function moveMeaning({ words }: Command, profile: Profile): Meaning | string {
  const { axis } = profile.cutAxis;
  const speed = words.get('F');
  if (words.size !== 2 || speed === undefined || !(speed > 0)) {
    return 'A move names one axis and a speed above zero.';
  }
  const feedTo = words.get('E');
  if (feedTo !== undefined && !Number.isNaN(feedTo)) return { is: 'feed', feedTo, unitsPerMin: speed };
  const cutAxisMm = words.get(axis);
  if (cutAxisMm !== undefined && !Number.isNaN(cutAxisMm)) {
    return { is: 'press', cutAxisMm, mmPerMin: speed };
  }
  return `Only ${axis} and E may be moved on this rig.`;
}

function declareMeaning({ words }: Command, profile: Profile): Meaning | string {
  const { axis } = profile.cutAxis;
  const cutAxisMm = words.get(axis);
  if (cutAxisMm !== undefined && !Number.isNaN(cutAxisMm) && words.size === 1)
    return { is: 'declare', cutAxisMm };
  if (words.get('E') !== 0) return `G92 sets ${axis} alone, or E to zero.`;
  if (words.size === 1) return { is: 'zero-feed' };
  const register = profile.registerAxis === null ? undefined : words.get(profile.registerAxis);
  if (words.size !== 2 || register === undefined || !Number.isSafeInteger(register)) {
    return 'Beside E only the register axis may be set, to a whole number.';
  }
  return { is: 'register', register };
}

/** Gives the one meaning of a command, or says in a sentence why it is refused. */
export function meaningOf(command: Command, profile: Profile): Meaning | string {
  if (SETTINGS.has(command.text)) return { is: 'setting' };
  if (command.text === 'M400') return { is: 'await' };
  if (command.text === 'M114') return { is: 'ask' };
  if (command.text === `G28 ${profile.cutAxis.axis}`) return { is: 'home' };
  if (command.code === 'G1') return moveMeaning(command, profile);
  if (command.code === 'G92') return declareMeaning(command, profile);
  return 'This command is not part of any program.';
}
