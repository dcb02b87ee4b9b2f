/** The answer of `M114`, `G92` and `G28`: commanded coordinates in mm (E in feed units), present steps. */
export interface PositionReport {
  X: number;
  Y: number;
  Z: number;
  E: number;
  count: { X: number; Y: number; Z: number } | null;
}

const NUMBER = String.raw`(-?\d+(?:\.\d+)?)`;
const PLACES = new RegExp(
  String.raw`^\s*X:\s*${NUMBER}\s+Y:\s*${NUMBER}\s+Z:\s*${NUMBER}\s+E:\s*${NUMBER}(?=\s|$)(.*)$`,
);
const COUNTS = /^\s*Count\s+X:\s*(-?\d+)\s+Y:\s*(-?\d+)\s+Z:\s*(-?\d+)\s*$/;

/** @returns null for anything but a whole report: half a number is worse than none. */
export function readPosition(line: string): PositionReport | null {
  const places = PLACES.exec(line);
  if (!places) return null;
  const [, X, Y, Z, E, rest = ''] = places;
  const counts = COUNTS.exec(rest);
  if (!counts && rest.trim() !== '') return null;
  const count = counts ? { X: Number(counts[1]), Y: Number(counts[2]), Z: Number(counts[3]) } : null;
  return { X: Number(X), Y: Number(Y), Z: Number(Z), E: Number(E), count };
}
