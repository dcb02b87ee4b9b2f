import { AXES, type Axis } from './axes';

/** Who holds which motor: the drivers' enable lines, the motor supply, and a guard wired into it. */
export class Power {
  readonly energised: Record<Axis, boolean> = { X: false, Y: false, Z: false, E: false };
  supplyOn = true;

  constructor(
    public guardOpen: boolean,
    private readonly guardCutsMotorPower: boolean,
  ) {}

  /** @returns whether the motor supply reaches the drivers. */
  get supplied(): boolean {
    return this.supplyOn && !(this.guardOpen && this.guardCutsMotorPower);
  }

  /** @returns whether the motor of an axis turns or holds. */
  drives(axis: Axis): boolean {
    return this.supplied && this.energised[axis];
  }

  /** @returns whether any driver is enabled. */
  get anyEnergised(): boolean {
    return AXES.some((axis) => this.energised[axis]);
  }
}
