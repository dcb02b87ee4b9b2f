const LONGEST_LINE_CHARACTERS = 512;

/** Takes text in chunks of any cut and gives whole lines, without their ends. */
export interface Splitter {
  push(chunk: string): string[];
  /** Forgets a line that has begun. */
  clear(): void;
}

/** Lines end with LF, CR or both; a line longer than 512 characters is noise and given in pieces of that size. */
export function createSplitter(): Splitter {
  let rest = '';
  return {
    push(chunk) {
      const parts = (rest + chunk).split(/\r\n|\n|\r/);
      rest = parts.pop() ?? '';
      const lines = parts.filter((part) => part !== '');
      while (rest.length > LONGEST_LINE_CHARACTERS) {
        lines.push(rest.slice(0, LONGEST_LINE_CHARACTERS));
        rest = rest.slice(LONGEST_LINE_CHARACTERS);
      }
      return lines;
    },
    clear() {
      rest = '';
    },
  };
}
