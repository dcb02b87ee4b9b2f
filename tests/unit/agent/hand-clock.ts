import type { Clock } from '@/agent/clock';

/** A clock whose hands are moved by the test. */
export class HandClock implements Clock {
  #nowMs = 0;
  #timers: { atMs: number; call: () => void }[] = [];
  nowMs = () => this.#nowMs;
  date = () => new Date(this.#nowMs);
  after(ms: number, call: () => void) {
    const timer = { atMs: this.#nowMs + ms, call };
    this.#timers.push(timer);
    return () => {
      this.#timers = this.#timers.filter((other) => other !== timer);
    };
  }
  /** When the next timer is due. */
  nextAtMs(): number | null {
    return this.#timers.length === 0 ? null : Math.min(...this.#timers.map(({ atMs }) => atMs));
  }
  /** Moves the hands without a call; `pass(0)` makes the calls that are due. */
  moveTo(ms: number): void {
    this.#nowMs = Math.max(this.#nowMs, ms);
  }
  async pass(ms: number): Promise<void> {
    const untilMs = this.#nowMs + ms;
    for (;;) {
      await settle();
      const next = this.#timers.filter(({ atMs }) => atMs <= untilMs).sort((a, b) => a.atMs - b.atMs)[0];
      if (!next) break;
      this.#timers = this.#timers.filter((timer) => timer !== next);
      this.#nowMs = Math.max(this.#nowMs, next.atMs);
      next.call();
    }
    this.#nowMs = untilMs;
  }
}

/** Lets everything happen that waits for nothing but its turn. */
export async function settle(): Promise<void> {
  for (let round = 0; round < 20; round += 1) await Promise.resolve();
}
