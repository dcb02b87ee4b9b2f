const LONGEST_LINE_CHARACTERS = 512;

/** Takes text in chunks of any cut and gives whole lines, without their ends. */
export interface Splitter {
  push(chunk: string): string[];
  /** Forgets a line that has begun. */
  clear(): void;
}

/** The text in pieces of 512 characters, the last of 1 to 512; no piece of no text. */
function inPieces(text: string): string[] {
  const pieces: string[] = [];
  for (let at = 0; at < text.length; at += LONGEST_LINE_CHARACTERS) {
    pieces.push(text.slice(at, at + LONGEST_LINE_CHARACTERS));
  }
  return pieces;
}

/** Lines end with LF, CR or both; a line longer than 512 characters is noise and given in pieces of that size. */
export function createSplitter(): Splitter {
  let rest = '';
  return {
    push(chunk) {
      const parts = (rest + chunk).split(/\r\n|\n|\r/);
      const begun = inPieces(parts.pop() ?? '');
      rest = begun.pop() ?? '';
      return [...parts.flatMap(inPieces), ...begun];
    },
    clear() {
      rest = '';
    },
  };
}
