import type { Firmware } from '@/lib/protocol/report';
import { marlin } from './marlin';
import { repetier } from './repetier';

const SPOKEN = 'this agent speaks the Marlin and Repetier families';

/** Families that are told apart and not spoken to, each with what its firmware calls itself and why not. */
const OTHERS: readonly [RegExp, string][] = [
  [/reprapfirmware/i, 'RepRapFirmware, which drops a damaged line without a word'],
  [/smoothie/i, 'Smoothieware, which numbers and answers lines in another way'],
  [/klipper/i, 'a binary MCU protocol, not a G-code port'],
  [/\bgrbl\b/i, 'grbl, which has no feed axis and no line numbers'],
];

export type Identity = { known: true; firmware: Firmware } | { known: false; reason: string };

function field(text: string, name: string): string {
  const found = new RegExp(String.raw`(?:^|\s)${name}:(.*?)(?=\s+[A-Z_]+:|$)`).exec(text);
  return (found?.[1] ?? '').trim().slice(0, 200);
}

function strangerCalled(family: string): string {
  return `The firmware is ${family}; ${SPOKEN}.`.slice(0, 200);
}

/**
 * Judges the `FIRMWARE_NAME:` line of `M115` with its `Cap:` lines. `marlinBanner`: whether the board called itself
 * Marlin when it booted, for forks that bear another name.
 */
export function identify(
  text: string,
  capabilities: Record<string, boolean>,
  marlinBanner = false,
): Identity {
  const name = field(text, 'FIRMWARE_NAME');
  const other = OTHERS.find(([pattern]) => pattern.test(name));
  if (other) return { known: false, reason: strangerCalled(other[1]) };
  const isRepetier = /repetier/i.test(name);
  if (!isRepetier && !marlinBanner && !/marlin/i.test(text)) {
    return { known: false, reason: strangerCalled(`one that calls itself "${name.slice(0, 100)}"`) };
  }
  const machineType = field(text, 'MACHINE_TYPE');
  const virtual = /\bvirtual\b/i.test(machineType);
  const dialect = (isRepetier ? repetier : marlin).name;
  return { known: true, firmware: { name, machineType, virtual, dialect, capabilities } };
}

/** @returns why a port that did not answer `M115` is none of ours, or null when it may yet be. */
export function refusalOfStranger(line: string): string | null {
  if (/^Grbl\s|^error:\d+\s*$|^ALARM:\d+/.test(line)) {
    return strangerCalled('grbl, which has no feed axis and no line numbers');
  }
  if (/^Smoothie\b/.test(line)) {
    return strangerCalled('Smoothieware, which numbers and answers lines in another way');
  }
  const strange = [...line].filter((character) => /[^\x20-\x7e\t]/.test(character)).length;
  if (line.length >= 4 && strange * 2 > line.length) return 'Not a G-code port: what it says is not text.';
  return null;
}
