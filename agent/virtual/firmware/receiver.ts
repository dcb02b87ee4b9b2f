import type { LineNumbers, Verdict } from './numbers';

/** Characters of one line that the board keeps; the rest of a longer line is lost. */
const LINE_CHARACTERS = 95;

/** What the reader of lines asks of the rest of the firmware. */
export interface ReceiverLinks {
  send: (line: string) => void;
  /** A whole line has been taken, before it is queued: the early look for `M112` and `M410`. */
  early: (text: string) => void;
  /** A whole line has been queued; families that acknowledge it now do so. */
  received: (text: string) => void;
  /** Emergency parser: a command seen among the bytes themselves; `undefined` where none is built in. */
  emergency: ((code: string) => void) | undefined;
}

const TAKEN: Verdict = { is: 'taken' };

const EMERGENCY = /^\s*(?:N\d+\s*)?(M112|M410|M108)(?!\d)/;

/** Bytes in, numbered and checked lines out, with the board's small buffers. */
export class Receiver {
  /** Lines taken and not yet carried out, the one under way included. */
  readonly queue: string[] = [];
  private waiting = '';
  private line = '';
  private inComment = false;
  private watched = '';
  private numbers: LineNumbers;

  constructor(
    private readonly links: ReceiverLinks,
    private readonly makeNumbers: () => LineNumbers,
    private readonly receiveBytes: number,
    private readonly queuedLines: number,
  ) {
    this.numbers = makeNumbers();
  }

  get lastNumber(): number {
    return this.numbers.lastNumber;
  }

  set lastNumber(number: number) {
    this.numbers.lastNumber = number;
  }

  get freeLines(): number {
    return this.queuedLines - this.queue.length;
  }

  /** Takes what fits into the receive buffer. @returns what did not fit. */
  fill(text: string): string {
    const room = Math.max(0, this.receiveBytes - this.waiting.length);
    const taken = text.slice(0, room);
    this.watch(taken);
    this.waiting += taken;
    return text.slice(room);
  }

  /** Lets bytes pass that find the receive buffer full; only the emergency parser sees them. */
  overflow(text: string): void {
    this.watch(text);
  }

  /** Reads lines out of the receive buffer while the queue has room. */
  read(): void {
    let at = 0;
    while (at < this.waiting.length && this.freeLines > 0) {
      const character = this.waiting.charAt(at);
      at += 1;
      if (character === '\n' || character === '\r') {
        const length = this.waiting.length;
        if (this.endLine() === 'refused' || this.waiting.length !== length) at = this.waiting.length;
      } else this.collect(character);
    }
    this.waiting = this.waiting.slice(at);
  }

  /** Forgets all that came and is not carried out; `numbers` too after a reset. */
  clear(numbers: boolean): void {
    this.waiting = '';
    this.line = '';
    this.inComment = false;
    this.watched = '';
    this.queue.length = 0;
    if (numbers) this.numbers = this.makeNumbers();
  }

  /** Empties the receive buffer and asks for the next line again; this `ok` acknowledges nothing. */
  requestResend(): void {
    this.waiting = '';
    this.links.send(this.numbers.askAgain());
    this.links.send('ok');
  }

  private collect(character: string): void {
    if (character === ';') this.inComment = true;
    else if (!this.inComment && this.line.length < LINE_CHARACTERS) this.line += character;
  }

  private endLine(): 'taken' | 'refused' {
    const text = this.line.replace(/^ +/, '');
    const isEmpty = this.line === '';
    this.line = '';
    this.inComment = false;
    if (isEmpty) return 'taken';
    const verdict = text.startsWith('N') ? this.numbers.judge(text) : TAKEN;
    if (verdict.is === 'refused') {
      this.links.send(verdict.error);
      this.requestResend();
      return 'refused';
    }
    if (verdict.is === 'skipped') {
      this.links.send(`skip ${verdict.number}`);
      this.links.send('ok');
      return 'taken';
    }
    this.queue.push(text);
    this.links.received(text);
    this.links.early(text);
    return 'taken';
  }

  private watch(text: string): void {
    const { emergency } = this.links;
    if (emergency === undefined) return;
    for (const character of text) {
      if (character === '\n' || character === '\r') {
        const code = EMERGENCY.exec(this.watched)?.[1];
        this.watched = '';
        if (code !== undefined) emergency(code);
      } else if (this.watched.length < LINE_CHARACTERS) this.watched += character;
    }
  }
}
