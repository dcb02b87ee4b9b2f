import { LINEAR_AXES } from '../../mechanics/axes';
import { settingsLines } from '../banner';
import type { Firmware } from '../firmware';
import type { Commands } from './table';
import { atOnce } from './waits';

/** The usual UUID is the same on every machine of the family: no identity. */
const COMMON_UUID = 'cede2a2f-41a2-4748-9b12-c55c62f367ff';

function sendIdentity(firmware: Firmware): void {
  const { version, emergencyParser, wireSwitch } = firmware.settings;
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

function sendSwitches(firmware: Firmware): void {
  const { mechanics, settings } = firmware;
  firmware.send('Reporting endstop status');
  for (const axis of LINEAR_AXES) {
    const name = `${axis.toLowerCase()}_min`;
    if (name !== settings.guardSwitch) firmware.send(`${name}: ${reading(mechanics.switchPressed(axis))}`);
  }
  if (settings.guardSwitch !== null) {
    const closedIsPressed = settings.guardClosedReads === 'TRIGGERED';
    firmware.send(`${settings.guardSwitch}: ${reading(mechanics.power.guardOpen !== closedIsPressed)}`);
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
