import type { MechanicsSettings } from '../settings';
import { drawNormal, type Random } from './random';

/** The wire itself: what is left on the spool and what stands past the jaws. */
export class Wire {
  /** mm past the jaws since the last severed end. */
  pastJawsMm = 0;
  spoolMm: number;
  /** Between wire switch and feed wheel, after the spool has ended. */
  tailMm: number;
  /** Pulled out of the guide by hand. */
  out = false;
  jammed = false;
  slip: { mean: number; sd: number };
  private slipOfMove = 0;
  private moveId = -1;

  constructor(
    private readonly settings: MechanicsSettings,
    private readonly random: Random,
  ) {
    this.spoolMm = settings.spoolMm;
    this.tailMm = settings.tailMm;
    this.slip = { ...settings.slip };
  }

  /** @returns whether the wire switch sees wire. */
  get present(): boolean {
    return !this.out && this.spoolMm > 0;
  }

  /** Turns the feed wheel by `units` as part of the move `moveId`; slip is drawn once a move. */
  feed(moveId: number, units: number): void {
    if (moveId !== this.moveId) {
      this.moveId = moveId;
      const { mean, sd } = this.slip;
      this.slipOfMove = Math.min(1, sd === 0 ? mean : mean + sd * drawNormal(this.random));
    }
    if (this.jammed || this.out) return;
    const wantedMm = units * this.settings.wirePerUnit * (1 - this.slipOfMove);
    this.pastJawsMm += this.takeFromSpool(wantedMm);
  }

  /** Threads a new spool; the end stands at the jaws as far as it stood before. */
  loadSpool(lengthMm: number): void {
    this.spoolMm = lengthMm;
    this.tailMm = this.settings.tailMm;
    this.out = false;
  }

  private takeFromSpool(wantedMm: number): number {
    const takenMm = Math.min(wantedMm, this.spoolMm + this.tailMm);
    const fromSpoolMm = Math.min(takenMm, this.spoolMm);
    this.spoolMm -= fromSpoolMm;
    this.tailMm -= takenMm - fromSpoolMm;
    return takenMm;
  }
}
