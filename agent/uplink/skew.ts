/** The clock is judged by the best of so many round trips, about as many seconds. */
const SAMPLES = 16;

interface Sample {
  skewMs: number;
  roundTripMs: number;
}

/**
 * How far the server's clock is ahead of this computer's, from round trips: the server's time is taken to be that
 * of the middle of the trip, so the error is at most half the shortest trip (Cristian, 1989).
 */
export class SkewMeter {
  #samples: Sample[] = [];

  /** @param sentAt by this computer's clock @param serverAt by the server's */
  add(sentAt: Date, roundTripMs: number, serverAt: Date): void {
    const skewMs = serverAt.getTime() - (sentAt.getTime() + roundTripMs / 2);
    this.#samples = [...this.#samples, { skewMs, roundTripMs }].slice(-SAMPLES);
  }

  /** Server minus agent; 0 while nothing was measured. */
  get skewMs(): number {
    const best = this.#samples.reduce<Sample | null>(
      (least, sample) => (least === null || sample.roundTripMs < least.roundTripMs ? sample : least),
      null,
    );
    return best?.skewMs ?? 0;
  }
}
