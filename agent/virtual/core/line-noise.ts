import type { Random } from '../mechanics/random';

/**
 * What a bad cable does to a byte; `pair` flips one bit of two letters of a line with a checksum, which does not notice
 * it (protocol.md 0.6).
 */
export type NoiseKind = 'flip' | 'drop' | 'double' | 'pair';

/** Flips of these bits make another letter of most letters. */
const LETTER_BITS = 3;

/** One direction of the line, with the noise that is on it for its next bytes. */
export class LineNoise {
  private kind: NoiseKind = 'flip';
  private bytesLeft = 0;
  private probability = 0;

  constructor(private readonly random: Random) {}

  /** Disturbs each of the next `bytes` bytes with a probability of 0 to 1; of `pair` so many lines. */
  disturb(kind: NoiseKind, bytes: number, probability: number): void {
    this.kind = kind;
    this.bytesLeft = bytes;
    this.probability = probability;
  }

  /** @returns the text (one character a byte) as it arrives at the other end. */
  pass(text: string): string {
    if (this.bytesLeft === 0) return text;
    if (this.kind === 'pair') return this.passLine(text);
    let out = '';
    for (const byte of text) out += this.passByte(byte);
    return out;
  }

  /** A line with fewer than two letters waits for a better one. */
  private passLine(text: string): string {
    const end = text.lastIndexOf('*');
    const begin = text.indexOf(' ') + 1;
    const letters = [...text.slice(begin, Math.max(begin, end)).matchAll(/[A-Z]/g)].map(
      ({ index }) => begin + index,
    );
    const [first] = letters;
    const last = letters.at(-1);
    if (first === undefined || last === undefined || first === last) return text;
    this.bytesLeft -= 1;
    const bit = 1 << Math.floor(this.random() * LETTER_BITS);
    const flipped = [...text];
    for (const at of [first, last]) flipped[at] = String.fromCharCode(text.charCodeAt(at) ^ bit);
    return flipped.join('');
  }

  private passByte(byte: string): string {
    if (this.bytesLeft === 0) return byte;
    this.bytesLeft -= 1;
    if (this.random() >= this.probability) return byte;
    if (this.kind === 'drop') return '';
    if (this.kind === 'double') return byte + byte;
    return String.fromCharCode(byte.charCodeAt(0) ^ (1 << Math.floor(this.random() * 8)));
  }
}
