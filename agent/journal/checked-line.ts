import { crc32 } from 'node:zlib';

/** Hexadecimal digits of the checksum that stands before each record. */
const CHECKSUM_DIGITS = 8;

/** A value that a checked line could not give: the line is torn, flipped or no record at all. */
export const UNREADABLE = Symbol('unreadable');

/** One record as a line: CRC-32 of the JSON text in hexadecimal, a blank, the JSON text, a newline. */
export function encodeCheckedLine(value: unknown): Buffer {
  const text = Buffer.from(JSON.stringify(value), 'utf8');
  const checksum = crc32(text).toString(16).padStart(CHECKSUM_DIGITS, '0');
  return Buffer.concat([Buffer.from(`${checksum} `, 'latin1'), text, Buffer.from('\n', 'latin1')]);
}

/** @param line without its newline. @returns the value, or `UNREADABLE` when checksum or JSON do not hold */
export function decodeCheckedLine(line: Buffer): unknown {
  const head = line.subarray(0, CHECKSUM_DIGITS + 1).toString('latin1');
  if (!/^[0-9a-f]{8} $/.test(head)) return UNREADABLE;
  const text = line.subarray(CHECKSUM_DIGITS + 1);
  if (crc32(text) !== Number.parseInt(head, 16)) return UNREADABLE;
  try {
    return JSON.parse(text.toString('utf8'));
  } catch {
    return UNREADABLE;
  }
}
