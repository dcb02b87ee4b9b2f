/**
 * `npm run bench [-- NAME]`: runs scripts/bench/NAME.bench.ts, or all of them, each on a house of its own with the demo.
 * Exits with 1 when one could not measure; a missed goal is a result like any other.
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
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { tableOf } from './bench/table.mjs';
import { ensureDebianPackages, servicePackages } from './house/debian.mjs';
import { startHouse } from './house/house.mjs';
import { ensureNpmPackages } from './house/npm.mjs';
import { repo } from './house/repo.mjs';
import { ownSettings, readSettings } from './house/settings.mjs';
import { runTask } from './house/task.mjs';
import { Trouble, printTrouble } from './house/trouble.mjs';

const ENDING = '.bench.ts';
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

/** @param {string} name @param {string} resultDir @returns {Promise<import('./bench/table.mjs').Row>} */
async function measure(name, resultDir) {
  say(`\n${name}`);
  const folder = mkdtempSync(join(tmpdir(), 'ellwand-bench-'));
  chmodSync(folder, 0o711);
  const out = join(folder, 'result.json');
  try {
    const settings = await ownSettings(join(folder, 'data'), { demo: true, durable: true });
    const house = await startHouse({ settings, say, signal });
    try {
      await runTask({
        what: `${name} could not measure`,
        command: process.execPath,
        args: [join(repo, 'scripts/run.mjs'), `scripts/bench/${name}${ENDING}`],
        cwd: repo,
        env: { ...process.env, ...house.env, NODE_ENV: 'production', ELLWAND_BENCH_OUT: out },
        show: true,
        signal,
      });
    } finally {
      await house.stop();
    }
    if (!existsSync(out)) throw new Trouble(`${name} ended without a result`);
    copyFileSync(out, join(resultDir, `${name}.json`));
    return JSON.parse(readFileSync(out, 'utf8'));
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

/** @param {string[]} wanted @returns {Promise<boolean>} whether all could measure */
async function bench(wanted) {
  const names = chosen(wanted);
  await ensureNpmPackages({ say, signal });
  await ensureDebianPackages(servicePackages, { say, signal });
  const resultDir = join(readSettings(process.env, { demo: true }).dataDir, 'bench');
  mkdirSync(resultDir, { recursive: true });
  const rows = [];
  for (const name of names) {
    try {
      rows.push(await measure(name, resultDir));
    } catch (error) {
      signal.throwIfAborted();
      printTrouble(error);
    }
  }
  say(`\n${tableOf(rows)}\n\nAs files in ${resultDir}`);
  return rows.length > 0 && rows.length === names.length;
}

for (const name of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(name, () => stopping.abort(new Trouble('Stopped.')));
}
try {
  process.exitCode = (await bench(process.argv.slice(2))) ? 0 : 1;
} catch (error) {
  printTrouble(error);
  process.exitCode = 1;
}
