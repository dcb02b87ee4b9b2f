import type { Random } from '../mechanics/random';

/** What a bad cable does to a byte. */
export type NoiseKind = 'flip' | 'drop' | 'double';

/** One direction of the line, with the noise that is on it for its next bytes. */
export class LineNoise {
  private kind: NoiseKind = 'flip';
  private bytesLeft = 0;
  private probability = 0;

  constructor(private readonly random: Random) {}

  /** Disturbs each of the next `bytes` bytes with a probability of 0 to 1. */
  disturb(kind: NoiseKind, bytes: number, probability: number): void {
    this.kind = kind;
    this.bytesLeft = bytes;
    this.probability = probability;
  }

  /** @returns the text (one character a byte) as it arrives at the other end. */
  pass(text: string): string {
    if (this.bytesLeft === 0) return text;
    let out = '';
    for (const byte of text) out += this.passByte(byte);
    return out;
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
