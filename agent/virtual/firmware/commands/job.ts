import type { Command } from '../command';
import type { Firmware } from '../firmware';
import type { Commands } from './table';
import { atOnce } from './waits';

function wireWatch(firmware: Firmware, command: Command): void {
  const { memory } = firmware;
  const watch = command.words.get('S');
  const bySender = command.words.get('H');
  memory.wireMissingTold = false;
  if (watch !== undefined) memory.reportsMissingWire = watch !== 0;
  if (bySender !== undefined) memory.senderHandlesWire = bySender !== 0;
  if (command.words.size === 0)
    firmware.send(`echo:Filament runout ${memory.reportsMissingWire ? 'ON' : 'OFF'}`);
}

function runJob(firmware: Firmware, running: boolean): void {
  firmware.memory.jobRunning = running;
  firmware.memory.wireMissingTold = false;
}

/** The job timer, the wire switch that is watched while it runs, and what a person sees and hears. */
export const jobCommands: Commands = {
  M75: (firmware) => atOnce(() => runJob(firmware, true)),
  M76: (firmware) => atOnce(() => runJob(firmware, false)),
  M77: (firmware) => atOnce(() => runJob(firmware, false)),
  M117: (firmware, command) =>
    firmware.settings.display ? atOnce(() => firmware.show(command.rest)) : undefined,
  M300: (firmware) => (firmware.settings.beeper ? atOnce(() => undefined) : undefined),
  M412: (firmware, command) =>
    firmware.settings.wireSwitch ? atOnce(() => wireWatch(firmware, command)) : undefined,
};
