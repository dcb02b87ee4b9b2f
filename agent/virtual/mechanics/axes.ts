/** The four axes of the board; `E` is the wire feed. */
export type Axis = 'X' | 'Y' | 'Z' | 'E';
export type LinearAxis = 'X' | 'Y' | 'Z';
export type Axes = Record<Axis, number>;

export const AXES: readonly Axis[] = ['X', 'Y', 'Z', 'E'];
export const LINEAR_AXES: readonly LinearAxis[] = ['X', 'Y', 'Z'];

/** @returns a fresh set of axes, all at `value`. */
export function allAxes(value: number): Axes {
  return { X: value, Y: value, Z: value, E: value };
}
