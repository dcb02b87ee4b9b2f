/** Seconds in which a heater covers 63 % of the way to where it is heading, warming and cooling. */
const WARMING_S = 30;
const COOLING_S = 60;

/** One heater with its thermometer. It warms by the firmware's order, or by a fault in spite of it. */
export class Heater {
  temperatureC: number;
  targetC = 0;
  /** A stuck switch heats towards this, whatever the target says. */
  faultC: number | undefined;

  constructor(private readonly ambientC: number) {
    this.temperatureC = ambientC;
  }

  /** Lets `ms` of mechanical time pass: first-order approach (Newton's law of cooling). */
  advance(ms: number): void {
    const towardsC = Math.max(this.ambientC, this.faultC ?? this.targetC);
    if (towardsC === this.temperatureC) return;
    const constantS = towardsC > this.temperatureC ? WARMING_S : COOLING_S;
    const share = 1 - Math.exp(-ms / 1000 / constantS);
    this.temperatureC += (towardsC - this.temperatureC) * share;
  }

  /** @returns the drive as the firmware reports it, 0 to 127. */
  get drive(): number {
    return this.targetC > this.temperatureC ? 127 : 0;
  }
}
