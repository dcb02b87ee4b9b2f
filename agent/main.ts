/** The agent's commands, and the only file that constructs what touches the world. */
import { randomBytes, randomInt, randomUUID } from 'node:crypto';
import { readFile } from 'node:fs/promises';
import { Command } from 'commander';
import { runAgent } from './assemble';
import { scaledClock } from './clock';
import { ConfigError, loadConfig, type AgentConfig } from './config';
import { logFormatFor } from './config/log-format';
import { examine } from './doctor/examine';
import { printFindings } from './doctor/print';
import type { AgentEdges } from './edges';
import { JournalError } from './journal/errors';
import { openSerialPort } from './link/serial-port';
import { listUsbPorts } from './link/usb-ports';
import { createLog } from './log';
import { SOFTWARE } from './software';
import { askToStop } from './stop/stop-socket';
import { fetchTrusting } from './uplink/trusting-fetch';
import { EllwandError, ERRORS } from '@/lib/errors';

const CHALLENGE_BYTES = 18;

async function edgesFor(config: AgentConfig): Promise<AgentEdges> {
  const clock = scaledClock(config.clockSpeed);
  const { caFile, log } = config;
  return {
    clock,
    random: () => Math.random(),
    randomId: randomUUID,
    randomChallenge: () => randomBytes(CHALLENGE_BYTES).toString('base64url'),
    randomCode: () => String(randomInt(10_000)).padStart(4, '0'),
    openPort: openSerialPort,
    listPorts: listUsbPorts,
    fetch: caFile === undefined ? fetch : fetchTrusting(await readFile(caFile, 'utf8')),
    log: createLog({
      format: logFormatFor(log.format),
      level: log.level,
      date: () => clock.date(),
      write: (line) => process.stdout.write(line),
    }),
  };
}

async function run(configPath: string, closing: AbortController): Promise<void> {
  const config = await loadConfig(configPath);
  const edges = await edgesFor(config);
  const { log } = edges;
  if (config.allowUnencrypted) {
    const message =
      '"allowUnencrypted" is set: whoever is on the network can read the token and act as this agent.';
    log({ level: 'warning', code: 'unencrypted', message });
  }
  await runAgent(config, edges, closing);
}

async function stop(configPath: string, rig: string | null): Promise<void> {
  const { dataDir } = await loadConfig(configPath);
  const stopped = await askToStop(dataDir, rig);
  if (stopped === null) throw new Error('No agent answers here. Use the stop at the rig itself.');
  if (stopped === 0) throw new Error(`This agent has no rig "${rig ?? ''}".`);
  const whom = stopped === 1 ? 'Told to stop.' : `Told ${stopped} rigs to stop.`;
  console.log(`${whom} Nothing more is sent.`);
}

async function doctor(configPath: string, json: boolean): Promise<void> {
  const findings = await examine(configPath, edgesFor);
  console.log(json ? JSON.stringify(findings, null, 2) : printFindings(findings));
  if (!findings.well) process.exitCode = 1;
}

function explain(error: unknown): void {
  process.exitCode = 1;
  if (error instanceof ConfigError || error instanceof JournalError) console.error(error.message);
  else if (error instanceof EllwandError)
    console.error(`The agent cannot work: ${ERRORS[error.code].title} (${error.code})`, error.details);
  else console.error(error instanceof Error ? error.message : error);
}

interface Flags {
  config: string;
  all?: boolean;
  json?: boolean;
}

const program = new Command('agent')
  .description('Serves the rigs on this computer.')
  .version(SOFTWARE)
  .option('--config <file>', 'its configuration')
  .enablePositionalOptions()
  .action(async ({ config }: Partial<Flags>) => {
    if (config === undefined) {
      explain(new Error('Say where its configuration is: --config FILE'));
      return;
    }
    const closing = new AbortController();
    for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, () => closing.abort());
    await run(config, closing).catch(explain);
    process.exit();
  });

program
  .command('stop')
  .description('Stops a rig at once, without the server. Nothing moves but what is moving.')
  .argument('[rig]', 'its name or id')
  .requiredOption('--config <file>', 'the configuration of the agent that serves it')
  .option('--all', 'every rig of this agent')
  .action(async (rig: string | undefined, { config, all }: Flags) => {
    if (rig === undefined && all !== true) {
      explain(new Error('Say which rig, or --all.'));
      return;
    }
    await stop(config, all === true ? null : (rig ?? null)).catch(explain);
  });

program
  .command('doctor')
  .description('Looks at ports, firmware, server link and journal, and says what to do. Moves nothing.')
  .requiredOption('--config <file>', 'the configuration of the agent to look at')
  .option('--json', 'for programs')
  .action(async ({ config, json }: Flags) => {
    await doctor(config, json === true).catch(explain);
    process.exit();
  });

await program.parseAsync();
