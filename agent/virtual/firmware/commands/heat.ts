import type { Command } from '../command';
import type { Firmware } from '../firmware';
import type { Commands, Run } from './table';
import { atOnce, until } from './waits';

/** A heater counts as warm this near to its target. */
const WARM_WITHIN_C = 2;

function setTarget(firmware: Firmware, command: Command): void {
  const targetC = command.words.get('S');
  if (targetC !== undefined) firmware.mechanics.heater.targetC = targetC;
}

function* awaitWarm(firmware: Firmware, command: Command): Run {
  setTarget(firmware, command);
  const { heater } = firmware.mechanics;
  firmware.memory.heatWaitBroken = false;
  while (heater.targetC - heater.temperatureC > WARM_WITHIN_C && !firmware.memory.heatWaitBroken) {
    yield until(firmware.nowMs + 1000);
    firmware.send(`${firmware.temperatureText()} W:?`);
  }
}

/** Where the ok has gone out already, the temperature comes on a line of its own. */
function tellTemperature(firmware: Firmware): string | void {
  if (!firmware.family.acksOnReceipt) return `ok ${firmware.temperatureText()}`;
  firmware.send(firmware.temperatureText());
}

/** The heater. `M105` answers with its ok in front of the temperature, and no second one. */
export const heatCommands: Commands = {
  M104: (firmware, command) => atOnce(() => setTarget(firmware, command)),
  M105: (firmware) => atOnce(() => tellTemperature(firmware)),
  M109: awaitWarm,
  M155: (firmware, command) =>
    atOnce(() => firmware.reportTemperatureEvery((command.words.get('S') ?? 0) * 1000)),
};
