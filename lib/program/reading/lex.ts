import { PROGRAM_PARTS, type ProgramPart } from '../steps';

/** A line of the text, taken apart and not yet understood. */
export type SourceLine = { lineNumber: number; text: string } & (
  | { is: 'marker'; part: ProgramPart; piece: number | null }
  | { is: 'command'; code: string; words: ReadonlyMap<string, number> }
);

/** 80 characters on the wire, less room for `N12345678 ` and `*255`. */
const LONGEST_COMMAND = 80 - 'N12345678 '.length - '*255'.length;

const MARKER = /^;@ (?:piece ([1-9]\d{0,4})|([a-z]+))$/;
const COMMAND = /^([GM]\d{1,3})((?: [A-Z](?:-?\d{1,7}(?:\.\d{1,4})?)?)*)$/;

function lexMarker(text: string, lineNumber: number): SourceLine | string {
  const found = MARKER.exec(text);
  const piece = found?.[1];
  if (piece !== undefined) return { lineNumber, text, is: 'marker', part: 'piece', piece: Number(piece) };
  const part = PROGRAM_PARTS.find((known) => known === found?.[2] && known !== 'piece');
  return part ? { lineNumber, text, is: 'marker', part, piece: null } : 'This comment marks no known part.';
}

function lexCommand(text: string, lineNumber: number): SourceLine | string {
  const [, code, tail] = COMMAND.exec(text) ?? [];
  if (code === undefined || tail === undefined) {
    return 'This is no command of capital letters and plain numbers.';
  }
  const words = new Map<string, number>();
  for (const word of tail.split(' ').slice(1)) {
    const letter = word.slice(0, 1);
    if (words.has(letter)) return `${letter} stands twice on this line.`;
    words.set(letter, word.length > 1 ? Number(word.slice(1)) : Number.NaN);
  }
  return { lineNumber, text, is: 'command', code, words };
}

/** Takes one line apart, or says in a sentence why it cannot. */
export function lexLine(text: string, lineNumber: number): SourceLine | string {
  if (text.startsWith(';')) return lexMarker(text, lineNumber);
  if (text.length > LONGEST_COMMAND) return `This line is longer than ${LONGEST_COMMAND} characters.`;
  return lexCommand(text, lineNumber);
}
