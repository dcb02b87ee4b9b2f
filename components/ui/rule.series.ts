/** One mark of a rule: where it stands (0 to 1), how long it is, and the number beside it. */
export interface Tick {
  value: number;
  ratio: number;
  long: boolean;
  label: string | null;
}

const STEPS = [1, 2, 5, 10, 20, 50, 100, 200, 500, 1000, 2000, 5000];

/**
 * Marks for a rule from 0 to `max`: at most `labelsMost` numbered ones, five or ten between. The numbered step is the
 * smallest of 1, 2, 5 · 10ⁿ that fits, so the numbers are ones a person can halve.
 */
export function ruleTicks(max: number, labelsMost: number): Tick[] {
  if (!(max > 0)) return [];
  const step = STEPS.find((candidate) => max / candidate <= labelsMost) ?? 10_000;
  const small = step >= 10 && max / step <= 5 ? step / 10 : step >= 5 ? step / 5 : step;
  const ticks: Tick[] = [];
  for (let index = 0; index * small <= max; index += 1) {
    const value = index * small;
    const numbered = value % step === 0;
    ticks.push({
      value,
      ratio: value / max,
      long: numbered,
      label: numbered && value > 0 ? String(value) : null,
    });
  }
  return ticks;
}
