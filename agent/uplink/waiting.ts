import type { Clock } from '@/agent/clock';

/** The server hears of news this much later: a rig's next lines, a few ms apart, go out before any call is made. */
export const GATHER_MS = 10;

/** Resolves after `ms`, or at once when `closing` is aborted. */
export function pauseUntil(clock: Clock, ms: number, closing: AbortSignal): Promise<void> {
  return new Promise((resolve) => {
    if (closing.aborted) return resolve();
    const finish = () => {
      callOff();
      closing.removeEventListener('abort', finish);
      resolve();
    };
    const callOff = clock.after(ms, finish);
    closing.addEventListener('abort', finish);
  });
}

/** Wakes one waiting loop. A ring that nobody waits for is kept for the next wait; several are one. */
export class Bell {
  #rung = false;
  #wake: (() => void) | null = null;

  ring(): void {
    this.#rung = true;
    this.#wake?.();
  }

  /** Forgets a ring: what it told of is being seen to. */
  hush(): void {
    this.#rung = false;
  }

  /** Resolves when rung; with `clock` and `ms`, at the latest after that time. */
  async wait(limit?: { clock: Clock; ms: number }): Promise<void> {
    if (!this.#rung) {
      await new Promise<void>((resolve) => {
        const callOff = limit?.clock.after(limit.ms, resolve);
        this.#wake = () => {
          callOff?.();
          resolve();
        };
      });
    }
    this.#wake = null;
    this.#rung = false;
  }
}

/** A signal that aborts after a time that can be begun anew, or when `closing` does. */
export class Deadline {
  readonly #controller = new AbortController();
  readonly #abort = () => this.#controller.abort();
  #callOff: () => void;

  constructor(
    private readonly clock: Clock,
    private readonly ms: number,
    private readonly closing: AbortSignal,
  ) {
    this.#callOff = clock.after(ms, this.#abort);
    if (closing.aborted) this.#abort();
    // By hand: AbortSignal.any keeps memory for as long as its longest-lived signal.
    closing.addEventListener('abort', this.#abort);
  }

  get signal(): AbortSignal {
    return this.#controller.signal;
  }

  renew(): void {
    this.#callOff();
    this.#callOff = this.clock.after(this.ms, this.#abort);
  }

  end(): void {
    this.#callOff();
    this.closing.removeEventListener('abort', this.#abort);
  }
}
