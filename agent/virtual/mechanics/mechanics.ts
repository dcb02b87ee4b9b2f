import type { MechanicsSettings } from '../settings';
import type { TallyEvent, TallySink } from '../tally';
import { AXES, LINEAR_AXES, type Axes, type Axis, type LinearAxis } from './axes';
import { Blade } from './blade';
import { Heater } from './heater';
import { Jaws } from './jaws';
import { Power } from './power';
import { seededRandom } from './random';
import { Wire } from './wire';

/** Part of one move that the stepper drivers put out between two moments. */
export interface MoveSlice {
  moveId: number;
  homing: boolean;
  /** What this slice asks of each axis: mm, for E feed units. */
  deltaMm: Axes;
  /** Axes that the whole move turns. */
  axes: readonly Axis[];
  startMs: number;
  /** Mechanical time at which `share` (0 to 1) of this slice is done. */
  timeAtShare: (share: number) => number;
  register: number;
  feedMm: number;
  motionMs: number;
}

/** What the tally writes of the firmware's view beside a closing. */
type FirmwareView = Pick<MoveSlice, 'register' | 'feedMm' | 'motionMs'>;

const NO_VIEW: FirmwareView = { register: 0, feedMm: 0, motionMs: 0 };

/** The rig's body: it follows the stepper drivers as far as power, wire and travel let it. */
export class Mechanics {
  readonly positionMm: Axes;
  readonly blade: Blade;
  readonly wire: Wire;
  readonly heater: Heater;
  readonly jaws: Jaws;
  readonly power: Power;
  readonly counts = { closings: 0, severed: 0, guardOpenMotions: 0, limitsExceeded: 0 };
  private nowMs = 0;
  private view = NO_VIEW;
  private guardOpenMove = -1;
  private overrunMove = -1;

  constructor(
    private readonly settings: MechanicsSettings,
    seed: number,
    private readonly sink: TallySink,
  ) {
    this.positionMm = { ...settings.startMm };
    this.blade = new Blade(settings.blade, seededRandom(seed));
    this.wire = new Wire(settings, seededRandom(seed + 1_000_003));
    this.heater = new Heater(settings.ambientC);
    this.jaws = new Jaws(settings.jaws, this.positionMm[settings.cutAxis]);
    this.power = new Power(settings.guardOpen, settings.guardCutsMotorPower);
  }

  /** Lets time pass without motion; motion itself comes by `follow`. */
  advanceTo(nowMs: number): void {
    this.heater.advance(nowMs - this.nowMs);
    this.nowMs = nowMs;
  }

  /** Turns the motors as a slice of a move asks, and tallies what that did. */
  follow(slice: MoveSlice): void {
    const turning = slice.axes.filter((axis) => this.power.drives(axis));
    if (turning.length === 0) return;
    this.view = slice;
    this.noteGuardOpen(slice, turning);
    for (const axis of LINEAR_AXES) {
      if (turning.includes(axis)) this.shift(axis, slice.deltaMm[axis], slice.timeAtShare, slice.moveId);
    }
    if (turning.includes('E')) this.feed(slice);
  }

  /** @returns mm from here to the home switch of an axis, signed. */
  toSwitchMm(axis: LinearAxis): number {
    return this.settings.switchMm[axis] - this.positionMm[axis];
  }

  /** @returns whether the home switch of an axis is pressed: at it, or beyond. */
  switchPressed(axis: LinearAxis): boolean {
    return this.toSwitchMm(axis) >= -1e-6;
  }

  /** Powers the drivers of some axes on or off, by the firmware's order. */
  energise(axes: readonly Axis[], on: boolean): void {
    for (const axis of axes) this.power.energised[axis] = on;
    this.relax();
  }

  /** Opens or closes the guard; where it is wired into the motor supply, the motors follow. */
  setGuard(open: boolean): void {
    if (open === this.power.guardOpen) return;
    const before = this.power.supplied;
    this.power.guardOpen = open;
    this.guardOpenMove = -1;
    this.tell({ kind: 'guard', open });
    this.tellSupply(before, 'guard');
  }

  /** Switches the motor supply, the logic stays alive. */
  setSupply(on: boolean): void {
    const before = this.power.supplied;
    this.power.supplyOn = on;
    this.tellSupply(before, 'supply');
  }

  /** Changes the wire (out, in, new spool …) and tallies when the wire switch sees it. */
  changeWire(change: (wire: Wire) => void): void {
    this.watchWire(() => change(this.wire));
  }

  /** Moves an axis by hand. @returns its place afterwards, mm in the machine's frame. */
  moveByHand(axis: Axis, byMm: number): number {
    this.view = NO_VIEW;
    if (axis === 'E') this.watchWire(() => this.wire.feed(-2, byMm));
    else this.shift(axis, byMm, () => this.nowMs, -2);
    this.tell({ kind: 'hand-moved', axis, byMm, atMm: this.positionMm[axis] });
    return this.positionMm[axis];
  }

  private tell(event: TallyEvent, atMs = this.nowMs): void {
    this.sink(event, atMs);
  }

  private tellSupply(before: boolean, cause: 'guard' | 'supply'): void {
    const on = this.power.supplied;
    if (on !== before) this.tell({ kind: 'motor-power', on, cause });
    this.relax();
  }

  /** Springs in the handles push the pusher of an unpowered cut axis back. */
  private relax(): void {
    const axis = this.settings.cutAxis;
    if (this.power.drives(axis)) return;
    const backMm = this.jaws.springBackMm(this.positionMm[axis]);
    if (backMm !== 0) this.shift(axis, backMm, () => this.nowMs, -1);
  }

  private shift(
    axis: LinearAxis,
    byMm: number,
    timeAtShare: (share: number) => number,
    moveId: number,
  ): void {
    const fromMm = this.positionMm[axis];
    const wantedMm = fromMm + byMm;
    const toMm = Math.min(this.settings.highestMm[axis], Math.max(this.settings.lowestMm[axis], wantedMm));
    this.positionMm[axis] = toMm;
    if (toMm !== wantedMm) this.noteOverrun(axis, wantedMm, toMm, moveId);
    if (axis !== this.settings.cutAxis) return;
    const share = this.jaws.pass(fromMm, toMm);
    if (share !== undefined) this.closeJaws(timeAtShare(byMm === 0 ? 0 : (share * (toMm - fromMm)) / byMm));
  }

  private closeJaws(atMs: number): void {
    const wireMm = this.wire.pastJawsMm;
    const severed = this.blade.close() && wireMm > 0.01;
    if (severed) this.wire.pastJawsMm = 0;
    this.counts.closings += 1;
    if (severed) this.counts.severed += 1;
    const { register, feedMm, motionMs } = this.view;
    this.tell(
      {
        kind: 'closing',
        wireMm: rounded(wireMm),
        severed,
        guardOpen: this.power.guardOpen,
        register,
        feedMm: rounded(feedMm),
        bladeCuts: this.blade.cuts,
        spoolMm: rounded(this.wire.spoolMm),
        motionMs: rounded(motionMs),
      },
      atMs,
    );
  }

  private feed(slice: MoveSlice): void {
    if (this.jaws.shut) return;
    this.watchWire(() => this.wire.feed(slice.moveId, slice.deltaMm.E));
  }

  private watchWire(change: () => void): void {
    const before = this.wire.present;
    change();
    const { present, spoolMm } = this.wire;
    if (present !== before) this.tell({ kind: 'wire', present, spoolMm: rounded(spoolMm) });
  }

  private noteGuardOpen(slice: MoveSlice, turning: Axis[]): void {
    if (!this.power.guardOpen || this.guardOpenMove === slice.moveId) return;
    this.guardOpenMove = slice.moveId;
    this.counts.guardOpenMotions += 1;
    const axes = AXES.filter((axis) => turning.includes(axis));
    this.tell({ kind: 'motion-guard-open', axes, homing: slice.homing }, slice.startMs);
  }

  private noteOverrun(axis: Axis, wantedMm: number, atMm: number, moveId: number): void {
    if (this.overrunMove === moveId) return;
    this.overrunMove = moveId;
    this.counts.limitsExceeded += 1;
    this.tell({ kind: 'limit-exceeded', axis, wantedMm: rounded(wantedMm), atMm });
  }
}

/** @returns the number to a micrometre, for the tally. */
function rounded(value: number): number {
  return Math.round(value * 1000) / 1000;
}
