/**
 * `npm run bench [-- NAME… [--minutes N]]`: runs scripts/bench/NAME.bench.ts, or all of them, each on a house of its own
 * with the demo. Exits with 1 when one could not measure; a missed goal is a result like any other.
 */
import {
  chmodSync,
  copyFileSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readFileSync,
  readdirSync,
  rmSync,
} from 'node:fs';
import { join } from 'node:path';
import { parseArgs } from 'node:util';
import { tableOf } from './bench/table.mjs';
import { chromiumPackage, ensureDebianPackages, servicePackages } from './house/debian.mjs';
import { startHouse } from './house/house.mjs';
import { ensureNpmPackages } from './house/npm.mjs';
import { repo } from './house/repo.mjs';
import { ownSettings, readSettings } from './house/settings.mjs';
import { runTask } from './house/task.mjs';
import { Trouble, printTrouble } from './house/trouble.mjs';

const ENDING = '.bench.ts';
/** These need none of the house's services. */
const WITHOUT_HOUSE = ['agent-time'];
/** A build of their own: tests that run meanwhile keep theirs. */
const NEXT_DIST = '.next/bench';
const say = console.log;
const stopping = new AbortController();
const { signal } = stopping;

/** @param {string[]} wanted @returns {string[]} names of benches; throws a Trouble for an unknown one */
function chosen(wanted) {
  const known = readdirSync(join(repo, 'scripts/bench'))
    .filter((file) => file.endsWith(ENDING))
    .map((file) => file.slice(0, -ENDING.length));
  const unknown = wanted.find((name) => !known.includes(name));
  if (unknown) throw new Trouble(`There is no bench "${unknown}". Known: ${known.join(', ')}`);
  return wanted.length > 0 ? wanted : known;
}

/** @typedef {import('./bench/table.mjs').Row} Row */

/**
 * Runs one bench in its own folder on the disk that the results lie on: a journal in memory would measure nothing.
 * @param {string} name @param {string[]} args @param {string} resultDir @returns {Promise<Row>}
 */
async function measure(name, args, resultDir) {
  say(`\n${name}`);
  const folder = mkdtempSync(join(resultDir, 'run-'));
  chmodSync(folder, 0o711);
  const out = join(folder, 'result.json');
  /** @param {Record<string, string>} env */
  const run = (env) =>
    runTask({
      what: `${name} could not measure`,
      command: process.execPath,
      args: [join(repo, 'scripts/run.mjs'), `scripts/bench/${name}${ENDING}`, ...args],
      cwd: repo,
      env: { ...process.env, ...env, NODE_ENV: 'production', TMPDIR: folder, ELLWAND_BENCH_OUT: out },
      show: true,
      signal,
    });
  try {
    if (WITHOUT_HOUSE.includes(name)) await run({});
    else await inHouse(join(folder, 'data'), run);
    if (!existsSync(out)) throw new Trouble(`${name} ended without a result`);
    copyFileSync(out, join(resultDir, `${name}.json`));
    return JSON.parse(readFileSync(out, 'utf8'));
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** @param {string} dataDir @param {(env: Record<string, string>) => Promise<unknown>} run */
async function inHouse(dataDir, run) {
  const settings = { ...(await ownSettings(dataDir, { demo: true, durable: true })), nextDist: NEXT_DIST };
  const house = await startHouse({ settings, say, signal });
  try {
    await run(house.env);
  } finally {
    await house.stop();
  }
}

/** @param {string[]} wanted @param {string[]} args @returns {Promise<boolean>} whether all could measure */
async function bench(wanted, args) {
  const names = chosen(wanted);
  await ensureNpmPackages({ say, signal });
  await ensureDebianPackages([...servicePackages, chromiumPackage], { say, signal });
  const resultDir = join(readSettings(process.env, { demo: true }).dataDir, 'bench');
  mkdirSync(resultDir, { recursive: true });
  /** @type {Row[]} */
  const rows = [];
  for (const name of names) {
    try {
      rows.push(await measure(name, args, resultDir));
    } catch (error) {
      signal.throwIfAborted();
      printTrouble(error);
    }
  }
  say(`\n${tableOf(rows)}\n\nAs files in ${resultDir}`);
  return rows.length > 0 && rows.length === names.length;
}

/** @param {string[]} args @returns {{names: string[], passedOn: string[]}} throws a Trouble for an unknown option */
function readArguments(args) {
  try {
    const { positionals, values } = parseArgs({
      args,
      allowPositionals: true,
      options: { minutes: { type: 'string' } },
    });
    return {
      names: positionals,
      passedOn: values.minutes === undefined ? [] : ['--minutes', values.minutes],
    };
  } catch (error) {
    throw new Trouble('npm run bench [-- NAME… [--minutes N]]', { cause: error });
  }
}

for (const name of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(name, () => stopping.abort(new Trouble('Stopped.')));
}
try {
  const { names, passedOn } = readArguments(process.argv.slice(2));
  process.exitCode = (await bench(names, passedOn)) ? 0 : 1;
} catch (error) {
  printTrouble(error);
  process.exitCode = 1;
}
