import type { Command } from '../command';
import type { Firmware } from '../firmware';
import type { Commands, Run } from './table';
import { atOnce } from './waits';

function setNumber(firmware: Firmware, command: Command): void {
  const number = command.words.get('N');
  if (number !== undefined) firmware.receiver.lastNumber = number;
}

function* revive(firmware: Firmware, command: Command): Run {
  firmware.state = 'running';
  if (!firmware.family.acksOnReceipt && !command.words.get('S')) firmware.receiver.requestResend();
}

/** Numbers, stops and the way back from them. */
export const stopCommands: Commands = {
  M108: (firmware) => atOnce(() => void (firmware.memory.heatWaitBroken = true)),
  M110: (firmware, command) => atOnce(() => setNumber(firmware, command)),
  M112: (firmware) => atOnce(() => firmware.kill()),
  M410: (firmware) => atOnce(() => firmware.quickStop()),
  M999: revive,
};
