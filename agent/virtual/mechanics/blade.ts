import type { MechanicsSettings } from '../settings';
import type { Random } from './random';

/** At the end of its life a blade leaves two closings in a hundred unsevered; before, a power of its age. */
const UNCUT_AT_LIFE = 0.02;

/** @returns the chance that closing number `cuts` + 1 does not sever: 0.02 · (cuts / life)^shape, at most 1. */
export function uncutChance(cuts: number, lifeCuts: number, shape: number): number {
  return Math.min(1, UNCUT_AT_LIFE * (cuts / lifeCuts) ** shape);
}

/** The cutter in the jaws: it ages with every closing. */
export class Blade {
  cuts: number;
  /** A fault set from outside, in place of the age; `undefined` is a blade that only ages. */
  fixedChance: number | undefined;

  constructor(
    private readonly settings: MechanicsSettings['blade'],
    private readonly random: Random,
  ) {
    this.cuts = settings.cuts;
  }

  /** @returns the chance of not severing, now. */
  get chance(): number {
    return this.fixedChance ?? uncutChance(this.cuts, this.settings.lifeCuts, this.settings.shape);
  }

  /** Closes on wire once. @returns whether the wire is severed. */
  close(): boolean {
    const severed = this.random() >= this.chance;
    this.cuts += 1;
    return severed;
  }

  /** Fits another blade. */
  replace(): void {
    this.cuts = 0;
    this.fixedChance = undefined;
  }
}
