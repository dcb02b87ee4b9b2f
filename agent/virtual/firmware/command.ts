/** One line, taken apart. `name` is `undefined` when the line starts with no known letter and number. */
export interface Command {
  text: string;
  name: string | undefined;
  /** Everything behind the code: the text of a display line. */
  rest: string;
  /** Parameter letters with their numbers; a letter without a number holds `undefined`. */
  words: ReadonlyMap<string, number | undefined>;
}

const NUMBERED = /^N-?\d+\s*/;
const CODE = /^([GMT])\s*(\d+)(?:\.\d+)?\s*(.*)$/s;
const WORD = /([A-Z])\s*([-+]?(?:\d+\.?\d*|\.\d+))?/g;

/** Takes a line apart: number and checksum fall away, numbers are single precision as on the board. */
export function parseCommand(line: string): Command {
  const bare = line.replace(NUMBERED, '');
  const star = bare.indexOf('*');
  const text = (star < 0 ? bare : bare.slice(0, star)).trimEnd();
  const code = CODE.exec(text);
  if (code === null) return { text, name: undefined, rest: '', words: new Map() };
  const rest = code[3] ?? '';
  const words = new Map<string, number | undefined>();
  for (const [, letter, digits] of rest.matchAll(WORD)) {
    if (letter !== undefined)
      words.set(letter, digits === undefined ? undefined : Math.fround(Number(digits)));
  }
  return { text, name: `${code[1] ?? ''}${Number(code[2])}`, rest, words };
}
