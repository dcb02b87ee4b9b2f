import { AXES, allAxes, type Axes, type Axis } from '../mechanics/axes';
import type { MoveSlice } from '../mechanics/mechanics';
import { distanceAt, timeAt, type Trapezoid } from '../mechanics/trapezoid';

/** One planned move, in whole steps put back into mm. */
export interface Move {
  deltaMm: Axes;
  trapezoid: Trapezoid;
  homing: boolean;
  register: number;
  feedMm: number;
}

interface Queued extends Move {
  id: number;
  axes: Axis[];
  startMs: number | undefined;
  doneShare: number;
}

/** What the step pulses reach: enable lines and motors. */
export interface Motors {
  energise: (axes: readonly Axis[], on: boolean) => void;
  follow: (slice: MoveSlice) => void;
}

/** Puts planned moves out in time, one after another, each from rest to rest. */
export class Stepper {
  /** Present place of each axis as the step counters have it, mm (E in units). */
  readonly presentMm: Axes = allAxes(0);
  /** Sum of the motion of all moves, mechanical ms. */
  motionMs = 0;
  /** When the last move ended. */
  lastMotionMs = 0;
  private readonly queue: Queued[] = [];
  private nextId = 1;
  private nowMs = 0;

  constructor(
    private readonly motors: Motors,
    private readonly plannerMoves: number,
  ) {}

  get idle(): boolean {
    return this.queue.length === 0;
  }

  /** One slot of the ring stays empty, so 16 give 15. */
  get freeSlots(): number {
    return this.plannerMoves - 1 - this.queue.length;
  }

  /** Takes a move; it starts at once when nothing is before it. */
  add(move: Move): void {
    const axes = AXES.filter((axis) => move.deltaMm[axis] !== 0);
    this.queue.push({ ...move, id: this.nextId, axes, startMs: undefined, doneShare: 0 });
    this.nextId += 1;
    if (this.queue.length === 1) this.startHead(this.nowMs);
  }

  /** @returns when the move under way ends. */
  dueAt(): number | undefined {
    const head = this.queue[0];
    return head?.startMs === undefined ? undefined : head.startMs + head.trapezoid.totalS * 1000;
  }

  /** Puts out everything up to `nowMs`. */
  advanceTo(nowMs: number): void {
    this.nowMs = nowMs;
    for (let head = this.queue[0]; head?.startMs !== undefined; head = this.queue[0]) {
      const startMs = head.startMs;
      const endMs = startMs + head.trapezoid.totalS * 1000;
      this.putOut(head, startMs, nowMs >= endMs ? 1 : shareAt(head.trapezoid, (nowMs - startMs) / 1000));
      if (nowMs < endMs) return;
      this.queue.shift();
      this.motionMs += endMs - startMs;
      this.lastMotionMs = endMs;
      this.startHead(endMs);
    }
  }

  /** Forgets all moves, without a ramp; the counters keep what was put out. */
  stop(): void {
    if (this.queue.length > 0) this.lastMotionMs = this.nowMs;
    this.queue.length = 0;
  }

  private startHead(atMs: number): void {
    const head = this.queue[0];
    if (head === undefined) return;
    head.startMs = atMs;
    this.motors.energise(head.axes, true);
  }

  private putOut(move: Queued, startMs: number, share: number): void {
    const fromShare = move.doneShare;
    if (share <= fromShare) return;
    const part = share - fromShare;
    const deltaMm = allAxes(0);
    for (const axis of move.axes) {
      deltaMm[axis] = move.deltaMm[axis] * part;
      this.presentMm[axis] += deltaMm[axis];
    }
    move.doneShare = share;
    const { trapezoid, id, axes, homing, register, feedMm } = move;
    const msAt = (ofMove: number) => timeAt(trapezoid, ofMove * trapezoid.distanceMm) * 1000;
    this.motors.follow({
      moveId: id,
      homing,
      axes,
      deltaMm,
      register,
      feedMm,
      startMs: startMs + msAt(fromShare),
      timeAtShare: (ofSlice) => startMs + msAt(fromShare + ofSlice * part),
      motionMs: this.motionMs + msAt(share),
    });
  }
}

function shareAt(trapezoid: Trapezoid, atS: number): number {
  return trapezoid.distanceMm === 0 ? 1 : distanceAt(trapezoid, atS) / trapezoid.distanceMm;
}
