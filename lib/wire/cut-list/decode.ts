/** What the bytes of an uploaded file turned out to be. */
export type Decoded = { ok: true; text: string } | { ok: false; found: string; instead: string };

const SAVE_AS_CSV = 'Open it in your spreadsheet and save it as CSV (UTF-8), then upload that file.';
const UTF8_BOM = [0xef, 0xbb, 0xbf];
const UTF16_LE_BOM = [0xff, 0xfe];
const UTF16_BE_BOM = [0xfe, 0xff];
const ZIP = [0x50, 0x4b, 0x03, 0x04];
const PDF = [0x25, 0x50, 0x44, 0x46];
const OLD_OFFICE = [0xd0, 0xcf, 0x11, 0xe0];
/** How many bytes tell UTF-16 without a mark from a binary file. */
const SAMPLE_BYTES = 2000;

function startsWith(bytes: Uint8Array, start: number[]): boolean {
  return start.every((byte, index) => bytes[index] === byte);
}

/** The share of zero bytes at even or odd places, 0 to 1: plain text in UTF-16 has one in every other place. */
function zeroShare(bytes: Uint8Array, parity: 0 | 1): number {
  const sample = bytes.subarray(0, SAMPLE_BYTES);
  let zeros = 0;
  for (let index = parity; index < sample.length; index += 2) if (sample[index] === 0) zeros += 1;
  return sample.length < 2 ? 0 : zeros / Math.ceil(sample.length / 2);
}

function encodingOf(bytes: Uint8Array): string {
  if (startsWith(bytes, UTF16_LE_BOM)) return 'utf-16le';
  if (startsWith(bytes, UTF16_BE_BOM)) return 'utf-16be';
  if (startsWith(bytes, UTF8_BOM)) return 'utf-8';
  if (zeroShare(bytes, 1) > 0.5 && zeroShare(bytes, 0) < 0.1) return 'utf-16le';
  if (zeroShare(bytes, 0) > 0.5 && zeroShare(bytes, 1) < 0.1) return 'utf-16be';
  return 'utf-8';
}

function decodeAs(bytes: Uint8Array, encoding: string): string | null {
  try {
    return new TextDecoder(encoding, { fatal: true }).decode(bytes);
  } catch (error) {
    // A TypeError is how the decoder says that the bytes are not of this encoding.
    if (error instanceof TypeError) return null;
    throw error;
  }
}

/** Control characters that no text file holds; tab, line feed and carriage return are not among them. */
function hasControls(text: string): boolean {
  for (const character of text) {
    const code = character.charCodeAt(0);
    if (code < 32 && code !== 9 && code !== 10 && code !== 13) return true;
  }
  return false;
}

/**
 * Bytes of a file to text: UTF-8 and UTF-16 with or without a byte-order mark, else Western (Windows-1252), which is
 * what older spreadsheets write. Never throws; what is no text comes back as what to do instead.
 */
export function decodeText(bytes: Uint8Array): Decoded {
  if (bytes.length === 0) {
    return { ok: false, found: 'an empty file', instead: 'Choose a file with a header and lines.' };
  }
  if (startsWith(bytes, ZIP) || startsWith(bytes, OLD_OFFICE)) {
    return { ok: false, found: 'a spreadsheet file', instead: SAVE_AS_CSV };
  }
  if (startsWith(bytes, PDF)) return { ok: false, found: 'a PDF', instead: SAVE_AS_CSV };
  const text = decodeAs(bytes, encodingOf(bytes)) ?? decodeAs(bytes, 'windows-1252');
  if (text === null || hasControls(text))
    return { ok: false, found: 'a file that is no text', instead: SAVE_AS_CSV };
  return { ok: true, text };
}
