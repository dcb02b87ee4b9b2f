/** Firmware cuts longer lines and asks for them again for ever (protocol.md 1). */
const LONGEST_FRAMED_CHARACTERS = 95;

const encoder = new TextEncoder();

/** XOR over all bytes of `text`, 0 to 255: the number after the `*` of a numbered line (protocol.md 1). */
export function xorChecksum(text: string): number {
  return encoder.encode(text).reduce((sum, byte) => sum ^ byte, 0);
}

/**
 * `N<n> <command>*<xor>`, without the line's end. Throws a RangeError for what the firmware would read as
 * something else: a line break, a second `*`, a comment, no command, a line too long, a number that is none.
 */
export function frameLine(lineNumber: number, command: string): string {
  if (!Number.isSafeInteger(lineNumber) || lineNumber < 0) throw new RangeError('not a line number');
  if (/[\r\n*;]/.test(command) || command.trim() === '') throw new RangeError('not a single command');
  const numbered = `N${lineNumber} ${command}`;
  const framed = `${numbered}*${xorChecksum(numbered)}`;
  if (encoder.encode(framed).length > LONGEST_FRAMED_CHARACTERS) throw new RangeError('line too long');
  return framed;
}
