/** One long-lived child: its own process group, its own log, started again when it dies, stopped with a ceiling. */
import { spawn } from 'node:child_process';
import { closeSync, mkdirSync, openSync } from 'node:fs';
import { dirname } from 'node:path';
import { identify, signalGroup } from './process.mjs';

/**
 * @typedef {object} ChildSpec
 * @property {string} name spoken and used for the log
 * @property {string} command
 * @property {string[]} args
 * @property {string} cwd
 * @property {NodeJS.ProcessEnv} env
 * @property {string} logFile its output is appended there
 * @property {NodeJS.Signals} stopSignal
 * @property {number} ceilingMs after this it is killed
 * @property {boolean} [tied] ends at once when this process is killed (tests; a real start recovers instead, in order)
 * @property {boolean} restart whether it is started again when it ends by itself
 * @property {(sentence: string) => void} say
 * @property {(identity: import('./process.mjs').Identity | undefined) => void} [onChange] told of each new process
 */

const FIRST_DELAY_MS = 500;
const LONGEST_DELAY_MS = 30_000;
/** A child that lived this long starts over with the shortest delay. */
const SETTLED_MS = 60_000;

/** @typedef {ReturnType<typeof startChild>} Child */

/** @param {ChildSpec} spec */
export function startChild(spec) {
  const state = {
    /** @type {import('node:child_process').ChildProcess | undefined} */
    process: undefined,
    /** @type {NodeJS.Timeout | undefined} */
    timer: undefined,
    stopping: false,
    delayMs: FIRST_DELAY_MS,
    startedAtMs: 0,
    /** @type {(() => void)[]} */
    waiters: [],
  };

  function launch() {
    const child = spawnLogged(spec);
    state.process = child;
    state.startedAtMs = Date.now();
    if (child.pid !== undefined) spec.onChange?.(identify(child.pid));
    child.once('error', (error) => ended(error.message));
    child.once('exit', (code, signal) => ended(signal ?? `code ${code}`));
  }

  /** @param {string} how */
  function ended(how) {
    if (!state.process) return;
    state.process = undefined;
    spec.onChange?.(undefined);
    for (const done of state.waiters.splice(0)) done();
    if (state.stopping) return;
    if (!spec.restart) {
      spec.say(`${spec.name} has ended (${how}); see ${spec.logFile}`);
      return;
    }
    if (Date.now() - state.startedAtMs > SETTLED_MS) state.delayMs = FIRST_DELAY_MS;
    spec.say(
      `${spec.name} has ended (${how}); starting it again in ${state.delayMs / 1000} s, see ${spec.logFile}`,
    );
    state.timer = setTimeout(launch, state.delayMs);
    state.delayMs = Math.min(state.delayMs * 2, LONGEST_DELAY_MS);
  }

  /** @param {NodeJS.Signals} [signal] */
  async function stop(signal = spec.stopSignal) {
    state.stopping = true;
    clearTimeout(state.timer);
    const pid = state.process?.pid;
    if (!state.process || pid === undefined) return;
    const gone = new Promise((/** @type {(value?: unknown) => void} */ done) => state.waiters.push(done));
    signalGroup(pid, signal);
    const killer = setTimeout(() => signalGroup(pid, 'SIGKILL'), spec.ceilingMs);
    await gone;
    clearTimeout(killer);
    // Whatever it started in its group and left behind goes with it.
    signalGroup(pid, 'SIGKILL');
  }

  launch();
  return {
    name: spec.name,
    stop,
    /** Ends the process as a crash would; it is started again when its spec says so. */
    crash: () => {
      if (state.process?.pid !== undefined) signalGroup(state.process.pid, 'SIGKILL');
    },
    pid: () => state.process?.pid,
    isRunning: () => state.process !== undefined,
  };
}

/** @param {ChildSpec} spec */
function spawnLogged(spec) {
  mkdirSync(dirname(spec.logFile), { recursive: true });
  const log = openSync(spec.logFile, 'a', 0o600);
  try {
    const tie = spec.tied ? ['setpriv', '--pdeathsig', spec.stopSignal.replace('SIG', '')] : [];
    const [command = spec.command, ...args] = [...tie, spec.command, ...spec.args];
    return spawn(command, args, {
      cwd: spec.cwd,
      env: spec.env,
      detached: true,
      stdio: ['ignore', log, log],
    });
  } finally {
    closeSync(log);
  }
}
