/** Between the halves of a split `ok`, wall ms. */
const SPLIT_GAP_MS = 60;

/** What can go wrong with an answer on its way out. */
export type OkFault = 'swallow' | 'double' | 'split';

interface Waiting {
  atMs: number;
  text: string;
}

/** The board's answers on their way to the line, with the faults of a bad line or a busy board. */
export class Answers {
  private readonly faults: Record<OkFault, number> = { swallow: 0, double: 0, split: 0 };
  private readonly waiting: Waiting[] = [];
  private mutedUntilMs = 0;

  constructor(
    private readonly put: (text: string) => void,
    /** Mechanical ms in one ms of the wall clock. */
    private readonly speed: number,
  ) {}

  /** The next `count` oks are swallowed, doubled or split. */
  spoil(fault: OkFault, count: number): void {
    this.faults[fault] = count;
  }

  /** Nothing goes out for `wallMs`; what would have is lost. */
  mute(nowMs: number, wallMs: number): void {
    this.mutedUntilMs = nowMs + wallMs * this.speed;
  }

  /** @returns when the next held text is due, mechanical ms. */
  nextDueAt(): number | undefined {
    return this.waiting[0]?.atMs;
  }

  /** Lets held text go whose time has come. */
  advanceTo(nowMs: number): void {
    while ((this.waiting[0]?.atMs ?? Number.POSITIVE_INFINITY) <= nowMs) {
      const next = this.waiting.shift();
      if (next !== undefined) this.put(next.text);
    }
  }

  /** Sends one line of the firmware at `nowMs`. */
  send(line: string, nowMs: number): void {
    if (nowMs < this.mutedUntilMs || (/^ok\b/.test(line) && this.take('swallow'))) return;
    if (!/^ok\b/.test(line)) this.hold(`${line}\n`, nowMs);
    else if (this.take('split')) {
      this.hold(line.slice(0, 1), nowMs);
      this.hold(`${line.slice(1)}\n`, nowMs + SPLIT_GAP_MS * this.speed);
    } else this.hold(this.take('double') ? `${line}\n${line}\n` : `${line}\n`, nowMs);
    this.advanceTo(nowMs);
  }

  private take(fault: OkFault): boolean {
    if (this.faults[fault] === 0) return false;
    this.faults[fault] -= 1;
    return true;
  }

  /** Order is kept: nothing overtakes the second half of a split answer. */
  private hold(text: string, atMs: number): void {
    const last = this.waiting[this.waiting.length - 1];
    this.waiting.push({ text, atMs: Math.max(atMs, last?.atMs ?? atMs) });
  }
}
