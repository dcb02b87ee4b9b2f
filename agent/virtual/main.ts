/** `npm run rig -- --tty PATH`: one virtual rig as a program of its own, a place to learn without a machine. */
import { Command, InvalidArgumentError, Option } from 'commander';
import { readRigConfig } from './config';
import { liveUntilSignal, reportFailure } from './lifetime';
import { createVirtualRig, type VirtualRigOptions } from './rig';
import type { RigInput } from './settings';

interface Flags {
  tty?: string;
  control?: string;
  tally?: string;
  config?: string;
  name?: string;
  speed?: number;
  seed?: number;
  resetOnOpen?: boolean;
  family?: 'marlin' | 'repetier';
  emergencyParser?: boolean;
  display?: boolean;
  guardSwitch?: string | false;
  guardCutsMotorPower?: boolean;
  wireSwitch?: boolean;
  spoolMm?: number;
  bladeCuts?: number;
  bladeLifeCuts?: number;
  slipMean?: number;
  slipSd?: number;
  wirePerUnit?: number;
  trace?: boolean;
}

function number(text: string): number {
  const value = Number(text);
  if (text.trim() === '' || !Number.isFinite(value)) throw new InvalidArgumentError('A number is needed.');
  return value;
}

function readFlags(): Flags {
  return new Command('rig')
    .description('A virtual rig behind a real pseudo-terminal. Faults: see agent/virtual/edges/control.ts.')
    .option('--tty <path>', 'where the serial port appears')
    .option('--control <path>', 'Unix socket for faults and questions')
    .option('--tally <file>', 'append-only JSON lines: what really happened')
    .option('--config <file>', 'JSON with any of the settings (agent/virtual/settings.ts); flags win')
    .option('--name <name>', 'name in the tally')
    .option('--speed <factor>', 'mechanical time over wall time', number)
    .option('--seed <n>', 'of slip, blade and noise', number)
    .option('--reset-on-open', 'opening the port resets the board')
    .option('--no-reset-on-open', 'a native USB board')
    .addOption(new Option('--family <family>', 'whose firmware it is').choices(['marlin', 'repetier']))
    .option('--emergency-parser', 'M112 is seen at once')
    .option('--no-emergency-parser', 'M112 waits for its turn')
    .option('--display', 'a display is fitted')
    .option('--no-display', 'M117 is unknown')
    .option('--guard-switch <endstop>', 'end stop the guard switch is wired to')
    .option('--no-guard-switch', 'no guard switch fitted')
    .option('--guard-cuts-motor-power', 'the guard is wired into the motor supply')
    .option('--wire-switch', 'a wire switch is fitted')
    .option('--no-wire-switch', 'no wire switch fitted')
    .option('--spool-mm <mm>', 'wire on the spool', number)
    .option('--blade-cuts <n>', 'cuts the blade has made before', number)
    .option('--blade-life-cuts <n>', 'cuts after which 2 in 100 closings do not sever', number)
    .option('--slip-mean <share>', 'share of each feed move that is lost', number)
    .option('--slip-sd <share>', 'its standard deviation', number)
    .option('--wire-per-unit <mm>', 'wire fed for one feed unit, 1 is true', number)
    .option('--trace', 'print the traffic on the line')
    .parse()
    .opts<Flags>();
}

/** Lays the flags that were given over the settings of the file. */
function withFlags(base: RigInput, flags: Flags): RigInput {
  const { firmware = {}, mechanics = {} } = base;
  const guardSwitch = flags.guardSwitch === false ? null : flags.guardSwitch;
  return {
    ...base,
    ...given({ name: flags.name, speed: flags.speed, seed: flags.seed, resetOnOpen: flags.resetOnOpen }),
    firmware: {
      ...firmware,
      ...given({ family: flags.family, emergencyParser: flags.emergencyParser, display: flags.display }),
      ...given({ guardSwitch, wireSwitch: flags.wireSwitch }),
    },
    mechanics: {
      ...mechanics,
      ...given({ spoolMm: flags.spoolMm, wirePerUnit: flags.wirePerUnit }),
      ...given({ guardCutsMotorPower: flags.guardCutsMotorPower }),
      slip: { ...mechanics.slip, ...given({ mean: flags.slipMean, sd: flags.slipSd }) },
      blade: { ...mechanics.blade, ...given({ cuts: flags.bladeCuts, lifeCuts: flags.bladeLifeCuts }) },
    },
  };
}

/** @returns only what has a value, so that a flag left out changes nothing. */
function given<Values extends object>(values: Values): Partial<Values> {
  const entries = Object.entries(values).filter(([, value]) => value !== undefined);
  return Object.fromEntries(entries) as Partial<Values>;
}

function optionsOf(flags: Flags): VirtualRigOptions {
  const base = flags.config === undefined ? {} : readRigConfig(flags.config);
  const tty = flags.tty ?? base.tty;
  if (tty === undefined) throw new Error('--tty PATH is needed');
  return {
    ...withFlags(base, flags),
    tty,
    control: flags.control ?? base.control,
    tally: flags.tally ?? base.tally,
  };
}

async function main(): Promise<void> {
  const flags = readFlags();
  const options = optionsOf(flags);
  const rig = createVirtualRig({
    ...options,
    onDisplay: (text) => console.log(`display: ${text}`),
    onTally: (line) => flags.trace === true && console.log(`tally: ${JSON.stringify(line)}`),
    onTraffic: (direction, text) => {
      if (flags.trace === true) console.log(`${direction === 'in' ? '>' : '<'} ${JSON.stringify(text)}`);
    },
    onFailed: reportFailure,
  });
  await liveUntilSignal([rig], () => console.log(`port: ${options.tty}`));
}

main().catch(reportFailure);
