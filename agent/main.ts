/** `npm run agent -- --config FILE` and `npm run agent -- stop RIG --config FILE`: the only file that constructs. */
import { randomBytes, randomInt, randomUUID } from 'node:crypto';
import { join } from 'node:path';
import { Command } from 'commander';
import { scaledClock, type Clock } from './clock';
import { ConfigError, loadConfig, type AgentConfig } from './config';
import { Fleet, type BoundRig } from './fleet/fleet';
import { objectionAt } from './fleet/objection';
import { openJournal } from './journal/journal';
import { JournalError } from './journal/errors';
import { openSerialPort } from './link/serial-port';
import { openProgramStore } from './programs/store';
import { loadHeldProgram } from './rig/held-program';
import { createRecorder } from './rig/recorder';
import { Rig } from './rig/rig';
import { isSnapshot, journalNoteSchema } from './runner/notes';
import { restoreRig } from './runner/restore';
import { SOFTWARE } from './software';
import { askToStop, openStopSocket } from './stop/stop-socket';
import { backOffMs } from './uplink/back-off';
import { obtainIdentity } from './uplink/pair';
import { loadCachedRigs, saveCachedRigs } from './uplink/rigs-cache';
import { createUplink, type Uplink } from './uplink/uplink';
import { pauseUntil } from './uplink/waiting';
import { EllwandError } from '@/lib/errors';
import type { BoundRigs } from '@/lib/protocol/pairing';

const CHALLENGE_BYTES = 18;

const random = () => Math.random();
const randomChallenge = () => randomBytes(CHALLENGE_BYTES).toString('base64url');
const randomCode = () => String(randomInt(10_000)).padStart(4, '0');
const say = (text: string) => console.log(text);

/** What only a person can mend ends the agent; while the server is away it is asked again. */
async function untilReached<Value>(
  call: () => Promise<Value>,
  clock: Clock,
  closing: AbortSignal,
): Promise<Value | null> {
  for (let tries = 1; !closing.aborted; tries += 1) {
    try {
      return await call();
    } catch (error) {
      if (!(error instanceof EllwandError) || error.code !== 'service-away') throw error;
      if (tries === 1) say('The server does not answer. It is asked again.');
      await pauseUntil(clock, backOffMs(tries, random()), closing);
    }
  }
  return null;
}

/** The rigs as the server says now, or as it said last when it does not answer (law 7). */
async function boundRigs(
  config: AgentConfig,
  uplink: Uplink,
  clock: Clock,
  closing: AbortSignal,
): Promise<BoundRigs | null> {
  const kept = await loadCachedRigs(config.dataDir);
  try {
    const rigs = await (kept ? uplink.fetchRigs() : untilReached(() => uplink.fetchRigs(), clock, closing));
    if (rigs) await saveCachedRigs(config.dataDir, rigs);
    return rigs;
  } catch (error) {
    if (!kept || !(error instanceof EllwandError)) throw error;
    say('The server does not answer. The rigs are taken as it told them last.');
    return kept;
  }
}

async function run(configPath: string, closing: AbortController): Promise<void> {
  const config = await loadConfig(configPath);
  const clock = scaledClock(config.clockSpeed);
  const { journal, history, damaged } = await openJournal({
    dir: join(config.dataDir, 'journal'),
    randomId: randomUUID,
    noteSchema: journalNoteSchema,
    isSnapshot,
    onDamage: ({ kind, path, offset }) => say(`DAMAGED JOURNAL: ${kind} in ${path} at byte ${offset}.`),
  });
  const programs = await openProgramStore(config.dataDir);
  const recorder = createRecorder(journal, history);
  await recorder.event({ kind: 'agent-started', software: SOFTWARE }, clock.date());
  const identity = await untilReached(
    () => obtainIdentity({ ...config, software: SOFTWARE, clock, fetch, closing: closing.signal }),
    clock,
    closing.signal,
  );
  if (!identity) return journal.close();
  const uplink = createUplink({
    server: config.server,
    token: identity.token,
    journal,
    software: SOFTWARE,
    clock,
    random,
    fetch,
    say: ({ topic, code, text }) => say(`${topic}${code === null ? '' : ` (${code})`}: ${text}`),
  });
  const fail = (error: unknown) => {
    console.error('The agent stops: it can keep no record any more.', error);
    process.exitCode = 1;
    closing.abort();
  };
  const startRig = async (bound: BoundRig, port: string): Promise<Rig> => {
    const { rigId, profile, fence } = bound;
    const memory = recorder.memoryOf(rigId);
    const held = await loadHeldProgram(memory, rigId, programs, uplink);
    if (memory?.run && !held)
      say(`The program of the run on "${bound.name}" is gone. Count its tray by hand.`);
    const nowMs = clock.date().getTime();
    const state = restoreRig({ rigId, profile, fence, challenge: randomChallenge(), nowMs, memory, held });
    const rig = new Rig({
      state,
      path: port,
      openPort: openSerialPort,
      clock,
      objection: objectionAt(config.clockSpeed),
      random,
      randomChallenge,
      randomCode,
      recorder,
      programs,
      uplink,
      onChange: () => fleet.report(),
      onFatal: fail,
    });
    await rig.start(damaged);
    return rig;
  };
  const fleet: Fleet = new Fleet({ config, uplink, date: () => clock.date(), startRig, say });
  const stopSocket = await openStopSocket(config.dataDir, (rig) => fleet.stop(rig));
  uplink.onCommand((command) => fleet.command(command));
  const rigs = await boundRigs(config, uplink, clock, closing.signal);
  if (rigs) {
    await fleet.bind(rigs);
    if (damaged) await journal.settleDamage();
    uplink.start();
    say(`The agent works for ${config.server}.`);
    await reportUntilClosed(fleet, clock, closing.signal);
  }
  await fleet.close();
  await uplink.close();
  await stopSocket.close();
  await journal.close();
}

/** Readings grow old by themselves: they are told again every second, changes at once. */
async function reportUntilClosed(fleet: Fleet, clock: Clock, closing: AbortSignal): Promise<void> {
  while (!closing.aborted) {
    await pauseUntil(clock, 1_000, closing);
    fleet.report();
  }
}

async function stop(configPath: string, rig: string | null): Promise<void> {
  const { dataDir } = await loadConfig(configPath);
  const stopped = await askToStop(dataDir, rig);
  if (stopped === null) {
    throw new Error('No agent answers here. Use the stop at the rig itself.');
  }
  if (stopped === 0) throw new Error(`This agent has no rig "${rig ?? ''}".`);
  say(
    stopped === 1
      ? 'Told to stop. Nothing more is sent.'
      : `Told ${stopped} rigs to stop. Nothing more is sent.`,
  );
}

function explain(error: unknown): void {
  process.exitCode = 1;
  if (error instanceof ConfigError || error instanceof JournalError) console.error(error.message);
  else if (error instanceof EllwandError)
    console.error(`The agent cannot work: ${error.code}.`, error.details);
  else console.error(error instanceof Error ? error.message : error);
}

interface Flags {
  config: string;
  all?: boolean;
}

const program = new Command('agent')
  .description('Serves the rigs on this computer.')
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

await program.parseAsync();
