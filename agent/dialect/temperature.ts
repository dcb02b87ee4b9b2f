/** What the heaters of a rig do together: the highest target and the highest actual, in °C. */
export interface TemperatureReport {
  targetC: number;
  actualC: number;
}

const HEATER = /(?:^|\s)(?:[TBC]\d*):\s*(-?\d+(?:\.\d+)?)\s*\/\s*(-?\d+(?:\.\d+)?)/g;

/** @returns null when the line names no heater, as a build without sensors answers. */
export function readTemperature(line: string): TemperatureReport | null {
  const heaters = [...line.matchAll(HEATER)];
  if (heaters.length === 0) return null;
  return {
    actualC: Math.max(...heaters.map((heater) => Number(heater[1]))),
    targetC: Math.max(...heaters.map((heater) => Number(heater[2]))),
  };
}
