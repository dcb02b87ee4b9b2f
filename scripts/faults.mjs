/**
 * `npm run faults -- --schedules N --seed S [--json FILE]`: seeded faults over a whole Ellwand with eight virtual rigs,
 * judged by their own tally. Exits with 0 only when every schedule holds. `--mutants` runs agents that lack something and
 * exits with 0 only when each is given away by its seeds.
 */
import { chmodSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { parseArgs } from 'node:util';
import { bundleEntry } from './house/bundle.mjs';
import { ensureDebianPackages, servicePackages } from './house/debian.mjs';
import { startHouse } from './house/house.mjs';
import { ensureNpmPackages } from './house/npm.mjs';
import { repo } from './house/repo.mjs';
import { ownSettings } from './house/settings.mjs';
import { Trouble, printTrouble } from './house/trouble.mjs';

const USAGE = 'npm run faults -- [--schedules N] [--seed S] [--json FILE] | --mutants';
const say = console.log;
const stopping = new AbortController();
const { signal } = stopping;

/** @param {string} name @param {string} text @param {number} least */
function readWhole(name, text, least) {
  const value = Number(text);
  if (Number.isSafeInteger(value) && value >= least) return value;
  throw new Trouble(`--${name} "${text}" is no whole number from ${least}. ${USAGE}`);
}

/** @param {string[]} args */
function readArguments(args) {
  const option = /** @type {const} */ ({ type: 'string' });
  try {
    const mutants = /** @type {const} */ ({ type: 'boolean', default: false });
    const { values } = parseArgs({
      args,
      options: { schedules: option, seed: option, json: option, mutants },
    });
    return {
      mutants: values.mutants,
      schedules: readWhole('schedules', values.schedules ?? '25', 1),
      seed: readWhole('seed', values.seed ?? '1', 0),
      json: values.json,
    };
  } catch (error) {
    if (error instanceof Trouble) throw error;
    throw new Trouble(USAGE, { cause: error });
  }
}

/** @param {ReturnType<typeof readArguments>} wanted @returns {Promise<boolean>} whether every schedule held */
async function runSchedules(wanted) {
  const folder = mkdtempSync(join(tmpdir(), 'ellwand-faults-'));
  chmodSync(folder, 0o711);
  try {
    const settings = await ownSettings(join(folder, 'house'), { demo: false, durable: false });
    const house = await startHouse({ settings, say, signal });
    try {
      const bundle = await bundleEntry(join(repo, 'scripts/faults/main.ts'));
      process.setSourceMapsEnabled(true);
      const { main, mainMutants } = await import(pathToFileURL(bundle).href);
      const grounds = { house, folder, repo, say };
      return await (wanted.mutants ? mainMutants(grounds) : main({ ...wanted, ...grounds }));
    } finally {
      await house.stop();
    }
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}

for (const name of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(name, () => {
    stopping.abort(new Trouble('Stopped.'));
  });
}
try {
  const wanted = readArguments(process.argv.slice(2));
  await ensureNpmPackages({ say, signal });
  await ensureDebianPackages(servicePackages, { say, signal });
  process.exitCode = (await runSchedules(wanted)) ? 0 : 1;
} catch (error) {
  printTrouble(error);
  process.exitCode = 1;
}
process.exit();
