/** `npm test`: verify, build, then every test on services of its own. The last line is the count of real results. */
import { randomBytes } from 'node:crypto';
import { chmodSync, mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { chromiumPackage, ensureDebianPackages, servicePackages } from './house/debian.mjs';
import { ensureNpmPackages } from './house/npm.mjs';
import { repo } from './house/repo.mjs';
import { runTask } from './house/task.mjs';
import { printTrouble } from './house/trouble.mjs';
import { endLeftRunning } from './test/left-running.mjs';
import { addTally, countReport, emptyTally, isGood, tallyLine } from './test/tally.mjs';

/** Integration tests mostly wait, so more of them than cores share the time. */
const WORKERS = /** @type {Record<string, number>} */ ({ unit: 1, integration: 4, browser: 1 });
const bin = join(repo, 'node_modules', '.bin');
const stopping = new AbortController();
const { signal } = stopping;
const run = randomBytes(8).toString('hex');
/** Every temporary folder of the run lies in it, and goes with it. */
const folder = mkdtempSync(join(tmpdir(), 'ellwand-test-'));
chmodSync(folder, 0o711);
const env = {
  ...process.env,
  NODE_ENV: /** @type {const} */ ('test'),
  TMPDIR: folder,
  ELLWAND_TEST_RUN: run,
};

/** @typedef {import('./test/tally.mjs').Tally} Tally */

/** @param {string} sentence */
function say(sentence) {
  console.log(sentence);
}

/** @param {string} name @param {string} command @param {string[]} args @returns {Promise<Tally>} one check */
async function check(name, command, args) {
  const startedAtMs = Date.now();
  try {
    const what = `${name} failed`;
    await runTask({ what, command, args, cwd: repo, env, signal, logFile: join(folder, `${name}.log`) });
    say(`${name}: passed, ${seconds(startedAtMs)}`);
    return { ...emptyTally(), passed: 1 };
  } catch (error) {
    signal.throwIfAborted();
    say(`${name}: FAILED, ${seconds(startedAtMs)}\n${readLog(name, error)}`);
    return { ...emptyTally(), failed: 1 };
  }
}

/** @param {number} sinceMs */
function seconds(sinceMs) {
  return `${((Date.now() - sinceMs) / 1000).toFixed(1)} s`;
}

/** @param {string} name @param {unknown} error */
function readLog(name, error) {
  try {
    return readFileSync(join(folder, `${name}.log`), 'utf8');
  } catch {
    return String(error);
  }
}

/**
 * Two lanes, for two cores: one computes and then waits, the other waits and then shares the cores.
 * @returns {Promise<Tally>}
 */
async function everything() {
  const build = check('build', process.execPath, [join(repo, 'scripts/build.mjs'), '--for-tests']);
  const withoutServices = async () => {
    const lint = await check('lint', join(bin, 'eslint'), ['.']);
    const format = await check('format', join(bin, 'prettier'), ['--check', '.']);
    const types = await check('types', join(bin, 'tsc'), ['--noEmit']);
    const unit = await test('unit', { show: false });
    await build;
    return [lint, format, types, unit, await underFaults()].reduce(addTally);
  };
  const withServices = async () => {
    const built = await build;
    // The browser, one test after the other, beside what computes; the tests that mostly wait beside the faults.
    const browser = await test('browser', { show: true });
    return [built, browser, await test('integration', { show: true })].reduce(addTally);
  };
  const lanes = await Promise.all([withoutServices(), withServices()]);
  return [...lanes, await nothingLeft()].reduce(addTally);
}

/** @returns {Promise<Tally>} the fixed seeds of the fault harness, and agents that lack something on theirs */
async function underFaults() {
  const program = join(repo, 'scripts/faults.mjs');
  const held = await check('faults', process.execPath, [program, '--schedules', '25', '--seed', '1']);
  const seen = await check('mutants', process.execPath, [program, '--mutants']);
  return addTally(held, seen);
}

/**
 * @param {string} project @param {{show: boolean}} options whether its words are shown at once or at its end
 * @returns {Promise<Tally>}
 */
async function test(project, { show }) {
  const report = join(folder, `${project}.json`);
  const logFile = join(folder, `${project}.log`);
  const workers = `--maxWorkers=${WORKERS[project] ?? 1}`;
  const args = ['run', '--project', project, workers, '--reporter=default', '--reporter=json'];
  if (show) say(`\nTests: ${project}`);
  try {
    const command = join(bin, 'vitest');
    const all = [...args, `--outputFile.json=${report}`];
    await runTask({ what: `${project} tests`, command, args: all, cwd: repo, env, signal, show, logFile });
  } catch (error) {
    // Which tests failed is in the report, and vitest has printed why.
    signal.throwIfAborted();
    if (!show) say(readLog(project, error));
  }
  const tally = countReport(readReport(report));
  say(`${project} tests: ${tallyLine(tally)}`);
  return tally;
}

/** @param {string} file @returns {unknown} */
function readReport(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return undefined;
  }
}

/** @returns {Promise<Tally>} a failure when the tests have left a process running */
async function nothingLeft() {
  const left = await endLeftRunning(run);
  if (left.length === 0) return emptyTally();
  say(`The tests left running:\n  ${left.join('\n  ')}`);
  return { ...emptyTally(), failed: 1 };
}

for (const name of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(name, () => stopping.abort(new Error(`Stopped by ${name}`)));
}
let total = emptyTally();
try {
  await ensureNpmPackages({ say, signal });
  await ensureDebianPackages([...servicePackages, chromiumPackage], { say, signal });
  total = await everything();
} catch (error) {
  printTrouble(error);
  total = addTally(total, { ...emptyTally(), failed: 1 });
} finally {
  await endLeftRunning(run);
  rmSync(folder, { recursive: true, force: true });
}
process.exitCode = isGood(total) ? 0 : 1;
console.log(`\n${tallyLine(total)}`);
