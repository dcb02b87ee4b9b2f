/** Where a coalescer gets its time from; the process's own outside of tests. */
export interface Timing {
  nowMs: () => number;
  after: (ms: number, act: () => void) => void;
}

export const processTiming: Timing = {
  nowMs: () => performance.now(),
  after: (ms, act) => void setTimeout(act, ms),
};

const RETRY_MS = 1_000;

/**
 * Gathers keys and hands them on together: at once after a rest, then at most every `gapMs`, and never two at a time.
 * What failed is tried again a second later with what came meanwhile.
 */
export class Coalescer {
  #keys = new Set<string>();
  #scheduled = false;
  #lastMs = -Infinity;

  constructor(
    private readonly gapMs: number,
    private readonly flush: (keys: string[]) => Promise<void>,
    private readonly onFailed: (cause: unknown) => void,
    private readonly timing: Timing = processTiming,
  ) {}

  add(key: string): void {
    this.#keys.add(key);
    this.#schedule(this.#leftMs());
  }

  #schedule(ms: number): void {
    if (this.#scheduled) return;
    this.#scheduled = true;
    this.timing.after(ms, () => void this.#run());
  }

  async #run(): Promise<void> {
    const keys = [...this.#keys];
    this.#keys.clear();
    this.#lastMs = this.timing.nowMs();
    let failed = false;
    try {
      await this.flush(keys);
    } catch (cause) {
      for (const key of keys) this.#keys.add(key);
      failed = true;
      this.onFailed(cause);
    }
    this.#scheduled = false;
    if (this.#keys.size > 0) this.#schedule(failed ? RETRY_MS : this.#leftMs());
  }

  /** Of the gap since the last handing on began. */
  #leftMs(): number {
    return Math.max(0, this.#lastMs + this.gapMs - this.timing.nowMs());
  }
}
