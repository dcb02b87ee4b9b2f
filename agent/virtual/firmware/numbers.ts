/** What becomes of a numbered line: taken, refused with the error's words, or passed over with an ok. */
export type Verdict = { is: 'taken' } | { is: 'refused'; error: string } | { is: 'skipped'; number: number };

/** How a family counts and checks lines. */
export interface LineNumbers {
  lastNumber: number;
  /** Judges a line that begins with `N`, and counts it when it is taken. */
  judge(text: string): Verdict;
  /** The line that asks for the next one again; from here on that one is waited for. */
  askAgain(): string;
}

/** The number of a line, the number that it sets with `M110`, and whether its checksum is there and right. */
export interface NumberedLine {
  number: number;
  sets: boolean;
  checksum: 'right' | 'wrong' | 'missing';
}

/** Takes number and checksum off a line that begins with `N`. */
export function readNumbered(text: string): NumberedLine {
  const sets = text.includes('M110');
  const second = sets ? text.indexOf('N', 4) : -1;
  const number = Number.parseInt(text.slice((second > 0 ? second : 0) + 1), 10);
  const star = text.lastIndexOf('*');
  const right = star >= 0 && Number.parseInt(text.slice(star + 1), 10) === xorOf(text.slice(0, star));
  return { number, sets, checksum: star < 0 ? 'missing' : right ? 'right' : 'wrong' };
}

/** Main family: number first, then checksum; every number but the next one is an error. */
export class MainNumbers implements LineNumbers {
  lastNumber = 0;

  judge(text: string): Verdict {
    const { number, sets, checksum } = readNumbered(text);
    if (!sets && number !== this.lastNumber + 1) {
      return this.refused('Line Number is not Last Line Number+1, Last Line: ');
    }
    if (checksum === 'missing') return this.refused('No Checksum with line number, Last Line: ');
    if (checksum === 'wrong') return this.refused('checksum mismatch, Last Line: ');
    this.lastNumber = Number.isNaN(number) ? 0 : number;
    return { is: 'taken' };
  }

  askAgain(): string {
    return `Resend: ${this.lastNumber + 1}`;
  }

  private refused(words: string): Verdict {
    return { is: 'refused', error: `Error:${words}${this.lastNumber}` };
  }
}

/** Lines back from the last one that count as seen. */
const SEEN_LINES = 40;
/** Lines after a Resend that may be other ones still on their way. */
const ON_THEIR_WAY = 14;
const MODULO = 65_536;

/** Repetier: checksum first; numbers modulo 65536; what was seen, or comes after a Resend, is skipped. */
export class RepetierNumbers implements LineNumbers {
  lastNumber = 0;
  private skipsLeft = -1;

  judge(text: string): Verdict {
    const { number, sets, checksum } = readNumbered(text);
    if (checksum === 'wrong') return { is: 'refused', error: 'Error:Wrong checksum' };
    if (!sets && !this.isNext(number)) return this.passOver(number);
    this.lastNumber = Number.isNaN(number) ? 0 : number;
    this.skipsLeft = -1;
    return { is: 'taken' };
  }

  askAgain(): string {
    this.skipsLeft = ON_THEIR_WAY;
    return `Resend:${this.lastNumber + 1}`;
  }

  private passOver(number: number): Verdict {
    const seen = (((this.lastNumber - number) % MODULO) + MODULO) % MODULO < SEEN_LINES;
    if (seen) return { is: 'skipped', number };
    if (this.skipsLeft < 0) {
      return { is: 'refused', error: `Error:expected line ${this.lastNumber + 1} got ${number}` };
    }
    this.skipsLeft -= 1;
    return { is: 'skipped', number };
  }

  private isNext(number: number): boolean {
    return (number - this.lastNumber - 1) % MODULO === 0;
  }
}

/** @returns the XOR over all bytes of a text. */
function xorOf(text: string): number {
  let sum = 0;
  for (let at = 0; at < text.length; at += 1) sum ^= text.charCodeAt(at) & 0xff;
  return sum;
}
