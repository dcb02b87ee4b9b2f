import { AXES, LINEAR_AXES, allAxes, type Axes, type LinearAxis } from '../mechanics/axes';
import type { FirmwareSettings } from '../settings';

/** What the firmware believes of the axes, single precision as on the board. */
export class Position {
  /** Where all accepted moves end, without the offsets of `G92`. */
  readonly nativeMm: Axes = allAxes(0);
  readonly offsetMm: Axes = allAxes(0);
  readonly homed: Record<LinearAxis, boolean> = { X: false, Y: false, Z: false };
  /** E counts for itself: `M83` and `M82`; `G91` and `G90` set all. */
  relative = false;
  relativeFeed = false;
  /** mm/s of moves that name no speed. */
  speedMmS = 25;

  constructor(private readonly settings: FirmwareSettings) {}

  /** @returns the coordinate as the firmware reports it. */
  logical(axis: keyof Axes): number {
    return Math.fround(this.nativeMm[axis] + this.offsetMm[axis]);
  }

  /** `G92`: gives the place of an axis another name. @returns mm by which the step counter changes with it. */
  rename(axis: keyof Axes, logicalMm: number): number {
    if (axis !== 'E' && this.settings.g92 === 'offset') {
      this.offsetMm[axis] = Math.fround(logicalMm - this.nativeMm[axis]);
      return 0;
    }
    const changeMm = logicalMm - this.logical(axis);
    this.nativeMm[axis] = Math.fround(logicalMm);
    return changeMm;
  }

  /** The home switch of an axis has just been found. */
  setHomed(axis: LinearAxis): void {
    this.nativeMm[axis] = Math.fround(this.settings.homeMm[axis]);
    this.offsetMm[axis] = 0;
    this.homed[axis] = true;
  }

  /** Holds a target within the soft end stops of the axes that have been homed; clips without a word. */
  clip(targetMm: Axes): void {
    for (const axis of LINEAR_AXES) {
      if (!this.homed[axis]) continue;
      const lowest = this.settings.softLowestMm[axis];
      targetMm[axis] = Math.min(this.settings.softHighestMm[axis], Math.max(lowest, targetMm[axis]));
    }
  }

  /** Believes the step counters, after moves were thrown away. */
  takeFrom(presentMm: Axes, stepsPerMm: Axes): void {
    for (const axis of AXES) {
      this.nativeMm[axis] = Math.fround(Math.round(presentMm[axis] * stepsPerMm[axis]) / stepsPerMm[axis]);
    }
  }
}
