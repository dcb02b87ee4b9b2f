/** The gauges of insulated wire that the pliers of a rig cut and its wheel feeds. */
export const THICKEST_AWG = 20;
export const THINNEST_AWG = 40;

/** Annealed copper at 20 °C (IEC value, trade.md 2). */
const RESISTIVITY_OHM_MM2_PER_M = 0.017241;
const RESISTANCE_PER_KELVIN = 0.00393;
const COPPER_G_PER_CM3 = 8.89;
const REFERENCE_C = 20;

/** Diameter in mm of a solid conductor: 0.005 in · 92^((36 − AWG)/39) (ASTM B258). */
export function diameterMm(awg: number): number {
  return 0.005 * 25.4 * 92 ** ((36 - awg) / 39);
}

/** Cross-section in mm² of a solid conductor: π/4 · d². */
export function areaMm2(awg: number): number {
  return (Math.PI / 4) * diameterMm(awg) ** 2;
}

/** Ohms of one metre of annealed copper: ρ/A, corrected by 0.00393/K from 20 °C. */
export function resistanceOhmPerM(awg: number, temperatureC = REFERENCE_C): number {
  const correction = 1 + RESISTANCE_PER_KELVIN * (temperatureC - REFERENCE_C);
  return (RESISTIVITY_OHM_MM2_PER_M / areaMm2(awg)) * correction;
}

/** Grams of copper in one metre, insulation not included: 1 mm² · 1 m is 1 cm³. */
export function copperGPerM(awg: number): number {
  return areaMm2(awg) * COPPER_G_PER_CM3;
}
