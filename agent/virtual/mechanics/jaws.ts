import type { MechanicsSettings } from '../settings';

/** The jaws meet a hair before the commanded depth, so that whole steps reach it. */
const MEETING_SLACK_MM = 0.02;

/** The pliers under the pusher: open, shut, and the springs of their handles. */
export class Jaws {
  shut: boolean;
  /** +1 when greater positions close the jaws, -1 when lesser ones do. */
  private readonly towards: 1 | -1;

  constructor(
    private readonly places: MechanicsSettings['jaws'],
    startMm: number,
  ) {
    this.towards = places.closedMm > places.openMm ? 1 : -1;
    this.shut = this.depth(startMm) >= -MEETING_SLACK_MM;
  }

  /**
   * Follows the pusher. @returns the share (0 to 1) of this way at which the jaws met, or `undefined` when they
   * did not, or were shut before and never opened.
   */
  pass(fromMm: number, toMm: number): number | undefined {
    const meetsAt = -MEETING_SLACK_MM;
    if (this.shut) {
      if (this.depth(toMm) <= this.depth(this.places.openMm)) this.shut = false;
      return undefined;
    }
    if (this.depth(toMm) < meetsAt) return undefined;
    this.shut = true;
    const wholeMm = this.depth(toMm) - this.depth(fromMm);
    return wholeMm <= 0 ? 0 : Math.min(1, Math.max(0, (meetsAt - this.depth(fromMm)) / wholeMm));
  }

  /** @returns how far the springs push a free pusher back from `atMm`, signed; 0 when it does not touch them. */
  springBackMm(atMm: number): number {
    return this.depth(atMm) > this.depth(this.places.restMm) ? this.places.restMm - atMm : 0;
  }

  /** @returns mm past the closed place, negative while the jaws stand open. */
  private depth(atMm: number): number {
    return (atMm - this.places.closedMm) * this.towards;
  }
}
