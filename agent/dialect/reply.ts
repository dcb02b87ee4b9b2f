import { readPosition, type PositionReport } from './position';
import { readTemperature, type TemperatureReport } from './temperature';

export type Refusal = 'cold' | 'long' | 'unknown' | 'invalid';

export interface SwitchReading {
  name: string;
  triggered: boolean;
}

/** One received line as a typed event; `text` is the line as it came. */
export type Reply = { text: string } & (
  | { kind: 'ok'; line: number | null; temperature: TemperatureReport | null }
  | { kind: 'resend'; line: number }
  /** A numbered line that is not carried out: it was taken before, or it is not the one asked for. */
  | { kind: 'skip'; line: number }
  /** `lastLine`: the last line that the firmware says it has. */
  | { kind: 'error'; lastLine: number | null }
  | { kind: 'halted' }
  | { kind: 'start' }
  | { kind: 'busy' }
  | { kind: 'wait' }
  | { kind: 'position'; position: PositionReport }
  /** `temperature` null: the firmware says that it has no sensor. */
  | { kind: 'temperature'; temperature: TemperatureReport | null }
  /** The switches are told: on this line, or on lines of their own after it. */
  | { kind: 'switches'; told: readonly SwitchReading[] }
  | ({ kind: 'switch' } & SwitchReading)
  | { kind: 'switch-hit' }
  | { kind: 'refusal'; refusal: Refusal }
  | { kind: 'action'; action: string }
  | { kind: 'identity' }
  | { kind: 'capability'; name: string; has: boolean }
  | { kind: 'blank' }
  | { kind: 'other' }
);

export type ReplyKind = Reply['kind'];

const REFUSALS: readonly [RegExp, Refusal][] = [
  [/^cold extrusion prevented/i, 'cold'],
  [/^too long extrusion prevented/i, 'long'],
  [/^unknown command/i, 'unknown'],
  [/^invalid\b/i, 'invalid'],
];

const DEAD = /^(printer halted|printer stopped due to errors|kill\(\) called)/i;

/** A reset may cut a line, so that its `start` is glued to the rest of it; the lines after it tell as well. */
const BEGUN_ANEW: readonly RegExp[] = [
  /^(?!\/\/|Error:|!!)(?:.*(?<!re))?start\s*$/,
  /^Marlin \d/,
  /^(?:Info:|echo:)?\s*(?:PowerUp|(?:External|Brown out|Watchdog|Software) Reset)\s*$/i,
];

function readError(text: string): Reply {
  const said = text.replace(/^(Error:|!!)\s*/i, '');
  if (DEAD.test(said)) return { text, kind: 'halted' };
  if (/^no thermistors/i.test(said)) return { text, kind: 'temperature', temperature: null };
  const last = /\bLast Line: (\d+)\s*$/.exec(said)?.[1];
  return { text, kind: 'error', lastLine: last === undefined ? null : Number(last) };
}

function readEcho(text: string): Reply {
  const said = text.replace(/^echo:\s*/i, '');
  if (/^busy:/i.test(said)) return { text, kind: 'busy' };
  if (/^endstops hit:/i.test(said)) return { text, kind: 'switch-hit' };
  const refusal = REFUSALS.find(([pattern]) => pattern.test(said))?.[1];
  return refusal ? { text, kind: 'refusal', refusal } : { text, kind: 'other' };
}

function readReport(text: string): Reply | null {
  const position = readPosition(text);
  if (position) return { text, kind: 'position', position };
  const endstop = /^([a-z]\d?_(?:min|max|probe)|z_probe|filament\d?): ?(open|TRIGGERED)$/.exec(text.trim());
  if (endstop) return { text, kind: 'switch', name: endstop[1] ?? '', triggered: endstop[2] === 'TRIGGERED' };
  if (/^Reporting endstop status/i.test(text)) return { text, kind: 'switches', told: [] };
  if (/^\s*[TB]\d?:/.test(text)) {
    const temperature = readTemperature(text);
    if (temperature) return { text, kind: 'temperature', temperature };
  }
  return null;
}

function readIdentity(text: string): Reply | null {
  if (/^FIRMWARE_NAME:/.test(text)) return { text, kind: 'identity' };
  const capability = /^Cap:([A-Z0-9_]+):([01])\s*$/.exec(text);
  if (!capability) return null;
  return { text, kind: 'capability', name: capability[1] ?? '', has: capability[2] === '1' };
}

/** Reads one line of the main family by its beginning; what fits nothing is `other` and belongs in the rig's log. */
export function readReply(text: string): Reply {
  if (text.trim() === '') return { text, kind: 'blank' };
  const ok = /^ok(?:\s+N(\d+))?(?=\s|$)/.exec(text);
  if (ok) {
    const line = ok[1] === undefined ? null : Number(ok[1]);
    return { text, kind: 'ok', line, temperature: readTemperature(text) };
  }
  const resend = /^(?:Resend:\s*|rs\s+N?)(\d+)\s*$/i.exec(text);
  if (resend) return { text, kind: 'resend', line: Number(resend[1]) };
  if (BEGUN_ANEW.some((pattern) => pattern.test(text))) return { text, kind: 'start' };
  if (/^wait\s*$/.test(text)) return { text, kind: 'wait' };
  if (/^(Error:|!!)/i.test(text)) return readError(text);
  if (/^\/\/\s*action:/.test(text)) {
    return { text, kind: 'action', action: text.replace(/^\/\/\s*action:\s*/, '').trim() };
  }
  if (/^busy:/i.test(text)) return { text, kind: 'busy' };
  return readReport(text) ?? readIdentity(text) ?? readEcho(text);
}
