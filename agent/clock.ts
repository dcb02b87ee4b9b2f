/** Time as the agent's parts are handed it. */
export interface Clock {
  /** Wall time. */
  date(): Date;
  /** Milliseconds that only go forward; good for differences alone. */
  nowMs(): number;
  /** Calls once after `ms`; gives the way to call it off. */
  after(ms: number, call: () => void): () => void;
}

/** The computer's own clock. */
export function systemClock(): Clock {
  return {
    date: () => new Date(),
    nowMs: () => performance.now(),
    after(ms, call) {
      const timer = setTimeout(call, ms);
      return () => clearTimeout(timer);
    },
  };
}

/**
 * The computer's clock with its waits and differences `speed` times as fast, for virtual rigs that run so fast; wall
 * time stays what it is. @param speed from 1
 */
export function scaledClock(speed: number): Clock {
  const clock = systemClock();
  if (speed === 1) return clock;
  return {
    date: () => clock.date(),
    nowMs: () => clock.nowMs() * speed,
    after: (ms, call) => clock.after(ms / speed, call),
  };
}

/** Resolves after `ms`. */
export function pause(clock: Clock, ms: number): Promise<void> {
  return new Promise((resolve) => clock.after(ms, resolve));
}
