import { LINEAR_AXES } from '../../mechanics/axes';
import { settingsLines } from '../banner';
import type { Firmware } from '../firmware';
import type { Commands } from './table';
import { atOnce } from './waits';

/** The usual UUID is the same on every machine of the family: no identity. */
const COMMON_UUID = 'cede2a2f-41a2-4748-9b12-c55c62f367ff';

function sendIdentity(firmware: Firmware): void {
  const { version, emergencyParser, wireSwitch, family } = firmware.settings;
  if (family === 'repetier') {
    firmware.send(
      'FIRMWARE_NAME:Repetier_1.0.4 (virtual) PROTOCOL_VERSION:1.0 MACHINE_TYPE:Ellwand virtual rig ' +
        'EXTRUDER_COUNT:1 REPETIER_PROTOCOL:3',
    );
    return;
  }
  firmware.send(
    `FIRMWARE_NAME:Marlin ${version} (virtual) PROTOCOL_VERSION:1.0 MACHINE_TYPE:Ellwand virtual rig ` +
      `EXTRUDER_COUNT:1 UUID:${COMMON_UUID}`,
  );
  const capabilities: [string, boolean][] = [
    ['SERIAL_XON_XOFF', false],
    ['EEPROM', false],
    ['AUTOREPORT_TEMP', true],
    ['EMERGENCY_PARSER', emergencyParser],
    ['HOST_ACTION_COMMANDS', true],
    ['RUNOUT', wireSwitch],
    ['PROMPT_SUPPORT', false],
  ];
  for (const [name, has] of capabilities) firmware.send(`Cap:${name}:${has ? 1 : 0}`);
}

/** All on one line, H for pressed; this family watches no wire switch. */
function sendLevels(firmware: Firmware): void {
  const { mechanics, settings } = firmware;
  const level = (pressed: boolean) => (pressed ? 'H' : 'L');
  const levels = LINEAR_AXES.map(
    (axis) => [`${axis.toLowerCase()}_min`, mechanics.switchPressed(axis)] as const,
  )
    .filter(([name]) => name !== settings.guardSwitch)
    .map(([name, pressed]) => `${name}:${level(pressed)}`);
  if (settings.guardSwitch !== null)
    levels.push(`${settings.guardSwitch}:${level(guardPressed(mechanics, settings))}`);
  firmware.send(`endstops hit: ${levels.join(' ')} `);
}

function guardPressed({ power }: Firmware['mechanics'], { guardClosedReads }: Firmware['settings']): boolean {
  return power.guardOpen !== (guardClosedReads === 'TRIGGERED');
}

function sendSwitches(firmware: Firmware): void {
  const { mechanics, settings, family } = firmware;
  if (!family.tellsSteps) return sendLevels(firmware);
  firmware.send('Reporting endstop status');
  for (const axis of LINEAR_AXES) {
    const name = `${axis.toLowerCase()}_min`;
    if (name !== settings.guardSwitch) firmware.send(`${name}: ${reading(mechanics.switchPressed(axis))}`);
  }
  if (settings.guardSwitch !== null) {
    firmware.send(`${settings.guardSwitch}: ${reading(guardPressed(mechanics, settings))}`);
  }
  if (settings.wireSwitch) firmware.send(`filament: ${reading(mechanics.wire.present)}`);
}

function reading(pressed: boolean): string {
  return pressed ? 'TRIGGERED' : 'open';
}

/** Answers about the board. */
export const reportCommands: Commands = {
  M115: (firmware) => atOnce(() => sendIdentity(firmware)),
  M119: (firmware) => atOnce(() => sendSwitches(firmware)),
  M503: (firmware) => atOnce(() => settingsLines(firmware).forEach((line) => firmware.send(line))),
};
