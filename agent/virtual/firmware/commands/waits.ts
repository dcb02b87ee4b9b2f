import type { Firmware } from '../firmware';
import type { Run, Wait } from './table';

/** Over when every planned move has been put out. */
export function motionEnded(firmware: Firmware): Wait {
  return { isOver: () => firmware.stepper.idle };
}

/** Over when the planner can take another move. */
export function slotFree(firmware: Firmware): Wait {
  return { isOver: () => firmware.stepper.freeSlots > 0 };
}

/** Over at a moment of mechanical time. */
export function until(atMs: number): Wait {
  return { isOver: (nowMs) => nowMs >= atMs, dueAt: () => atMs };
}

/** A command that is over as soon as it is begun. */
export function* atOnce(action: () => string | void): Run {
  return action();
}
