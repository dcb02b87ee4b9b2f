/** Commands that end by themselves: apt-get, npm ci, initdb, migrations, the build. */
import { spawn } from 'node:child_process';
import { accessSync, appendFileSync, constants, mkdirSync } from 'node:fs';
import { delimiter, dirname, join } from 'node:path';
import { signalGroup } from './process.mjs';
import { Trouble } from './trouble.mjs';

/**
 * @typedef {object} Task
 * @property {string} what said when it fails
 * @property {string} command
 * @property {string[]} args
 * @property {string} cwd
 * @property {NodeJS.ProcessEnv} [env]
 * @property {string} [input] written to its standard input
 * @property {string} [logFile] its output is appended there
 * @property {boolean} [show] its output goes to the screen too
 * @property {AbortSignal} [signal] ends it early
 */

const LINES_FIRST = 8;
const LINES_LAST = 20;

/**
 * Runs a task to its end and returns its standard output. It has a process group of its own, so Ctrl-C reaches it only
 * through `signal`. Throws a Trouble with its first and last lines when it fails.
 * @param {Task} task
 * @returns {Promise<string>}
 */
export function runTask(task) {
  task.signal?.throwIfAborted();
  return new Promise((resolve, reject) => {
    const child = spawn(task.command, task.args, {
      cwd: task.cwd,
      env: task.env ?? process.env,
      detached: true,
      stdio: ['pipe', 'pipe', 'pipe'],
    });
    let out = '';
    let all = '';
    const stop = () => child.pid !== undefined && signalGroup(child.pid, 'SIGTERM');
    task.signal?.addEventListener('abort', stop, { once: true });
    child.stdout.on('data', (chunk) => {
      out += chunk;
      keep(chunk);
    });
    child.stderr.on('data', keep);
    // A command that ends without reading its input is judged by its exit code.
    child.stdin.on('error', () => undefined);
    child.stdin.end(task.input ?? '');
    child.once('error', (error) => reject(new Trouble(`${task.what}: ${error.message}`, { cause: error })));
    child.once('close', (code, signal) => {
      task.signal?.removeEventListener('abort', stop);
      if (task.signal?.aborted) reject(task.signal.reason);
      else if (code === 0) resolve(out);
      else reject(new Trouble(`${task.what} (${signal ?? `code ${code}`}).\n${endsOf(all)}`));
    });

    /** @param {Buffer} chunk */
    function keep(chunk) {
      all += chunk;
      if (task.logFile) append(task.logFile, chunk);
      if (task.show) process.stdout.write(chunk);
    }
  });
}

/** @param {string} file @param {Buffer} chunk */
function append(file, chunk) {
  mkdirSync(dirname(file), { recursive: true });
  appendFileSync(file, chunk, { mode: 0o600 });
}

/** Some programs say what is wrong first, some last. @param {string} text */
function endsOf(text) {
  const lines = text.trimEnd().split('\n');
  if (lines.length <= LINES_FIRST + LINES_LAST) return lines.join('\n');
  return [...lines.slice(0, LINES_FIRST), '…', ...lines.slice(-LINES_LAST)].join('\n');
}

/** @param {string} command @returns {string | undefined} its absolute path, looked up in PATH and the system's folders */
export function findCommand(command) {
  const folders = [...(process.env.PATH ?? '').split(delimiter), '/usr/bin', '/usr/sbin', '/bin', '/sbin'];
  return folders
    .filter(Boolean)
    .map((folder) => join(folder, command))
    .find(isExecutable);
}

/** @param {string} path */
export function isExecutable(path) {
  try {
    accessSync(path, constants.X_OK);
    return true;
  } catch {
    return false;
  }
}

/** Environment of the system's programs: nothing of ours, and messages in one language. @returns {NodeJS.ProcessEnv} */
export function systemEnvironment() {
  const { PATH, ELLWAND_TEST_RUN } = process.env;
  // The mark by which a test run finds whatever it has left running.
  const mark = ELLWAND_TEST_RUN === undefined ? {} : { ELLWAND_TEST_RUN };
  return { NODE_ENV: 'production', PATH, LC_ALL: 'C.UTF-8', ...mark };
}
