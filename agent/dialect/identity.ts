import type { Firmware } from '@/lib/protocol/report';

const DIALECT = 'main family';

/** Families that are told apart and not spoken to, each with what its firmware calls itself. */
const OTHERS: readonly [RegExp, string][] = [
  [/repetier/i, 'Repetier'],
  [/reprapfirmware/i, 'RepRapFirmware'],
  [/smoothie/i, 'Smoothieware'],
  [/klipper/i, 'a binary MCU protocol'],
  [/\bgrbl\b/i, 'grbl'],
];

export type Identity = { known: true; firmware: Firmware } | { known: false; reason: string };

function field(text: string, name: string): string {
  const found = new RegExp(String.raw`(?:^|\s)${name}:(.*?)(?=\s+[A-Z_]+:|$)`).exec(text);
  return (found?.[1] ?? '').trim().slice(0, 200);
}

/** Judges the `FIRMWARE_NAME:` line of `M115` with its `Cap:` lines. */
export function identify(text: string, capabilities: Record<string, boolean>): Identity {
  const name = field(text, 'FIRMWARE_NAME');
  const other = OTHERS.find(([pattern]) => pattern.test(name));
  if (other) {
    return { known: false, reason: `The firmware is ${other[1]}; this agent speaks only the Marlin family.` };
  }
  if (!/marlin/i.test(text)) {
    return {
      known: false,
      reason: `The firmware calls itself "${name}", which is not of the Marlin family.`.slice(0, 200),
    };
  }
  const machineType = field(text, 'MACHINE_TYPE');
  const virtual = /\bvirtual\b/i.test(machineType);
  return { known: true, firmware: { name, machineType, virtual, dialect: DIALECT, capabilities } };
}

/** @returns why a port that did not answer `M115` is none of ours, or null when it may yet be. */
export function refusalOfStranger(line: string): string | null {
  if (/^Grbl\s|^error:\d+\s*$|^ALARM:\d+/.test(line)) {
    return 'The firmware is grbl; this agent speaks only the Marlin family.';
  }
  const strange = [...line].filter((character) => /[^\x20-\x7e\t]/.test(character)).length;
  if (line.length >= 4 && strange * 2 > line.length) return 'Not a G-code port: what it says is not text.';
  return null;
}
