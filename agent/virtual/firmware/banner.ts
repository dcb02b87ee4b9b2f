import { axesText } from './commands/settings';
import type { Firmware } from './firmware';

/** @returns the settings as the board lists them. */
export function settingsLines(firmware: Firmware): string[] {
  return [
    'echo:; Linear Units:',
    'echo:  G21 ; (mm)',
    'echo:; Steps per unit:',
    `echo:  ${axesText('M92', firmware.stepsPerMm)}`,
    'echo:; Max feedrates (units/s):',
    `echo:  ${axesText('M203', firmware.speedMmS)}`,
    'echo:; Max Acceleration (units/s2):',
    `echo:  ${axesText('M201', firmware.accelerationMmS2)}`,
  ];
}

/** @returns what the board says once when it has booted. */
export function bootLines(firmware: Firmware): string[] {
  if (firmware.settings.family === 'repetier') return ['start', 'Info:External Reset', 'Free RAM:2048'];
  return [
    'start',
    `Marlin ${firmware.settings.version}`,
    'echo: Ellwand virtual rig: no motor, no blade',
    'echo: Free Memory: 2048  PlannerBufferBytes: 1344',
    'echo:Hardcoded Default Settings Loaded',
    ...settingsLines(firmware),
  ];
}
