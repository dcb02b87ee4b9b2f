import { lotName } from '@/lib/fleet/lot-name';
import type { RigDto } from '@/lib/schemas/floor';

/** `−0 / +3 mm`, with a true minus sign. */
export function toleranceWords(minusMm: number, plusMm: number): string {
  return `−${minusMm} / +${plusMm} mm`;
}

/** Lengths of wire on a spool or in a lot: `61 m`, under ten metres with one decimal. */
export function metres(lengthMm: number): string {
  const metre = lengthMm / 1000;
  return `${metre < 10 ? metre.toFixed(1) : Math.round(metre)} m`;
}

/** A duration for a person: `7 min`, `2 h 10 min`, under 90 s in seconds. */
export function durationWords(seconds: number): string {
  if (seconds < 90) return `${Math.round(seconds)} s`;
  const minutes = Math.round(seconds / 60);
  if (minutes < 60) return `${minutes} min`;
  return `${Math.floor(minutes / 60)} h ${minutes % 60} min`;
}

/** How a rig's page names the lot that is on it. */
export function lotTitle(rig: RigDto): string {
  return rig.run ? lotName(rig.run) : 'No lot on this rig';
}
