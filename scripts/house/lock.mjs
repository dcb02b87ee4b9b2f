/** One start for each data folder, and what a start that was killed has left running there. */
import { mkdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { endLeftOverCluster } from './cluster.mjs';
import { holdFile } from './held-file.mjs';
import { endStranger, isAlive } from './process.mjs';
import { Trouble } from './trouble.mjs';

/** @typedef {import('./process.mjs').Identity} Identity */
/** @typedef {{name: string, identity: Identity, signal: NodeJS.Signals, ceilingMs: number}} Running */

/**
 * Takes the data folder for this process. Throws a Trouble when another living start holds it.
 * Returns the record of running children, which outlives a kill -9 of this process.
 * @param {string} dataDir @param {string} address said to whoever comes second
 */
export function takeLock(dataDir, address) {
  // The database's user passes through it; nobody lists it.
  mkdirSync(dataDir, { recursive: true, mode: 0o711 });
  const { release, holder } = holdFile(join(dataDir, 'start.lock'), address);
  if (release) return { release, record: childRecord(dataDir) };
  throw new Trouble(
    `Ellwand already runs on ${dataDir}: process ${holder.identity?.pid}, ${holder.note}.\n` +
      'A second one beside it needs ELLWAND_DATA_DIR and ports of its own: ' +
      'PORT, ELLWAND_DB_PORT, ELLWAND_REDIS_PORT, ELLWAND_MAIL_PORT.',
  );
}

/** @param {string} file */
function readJson(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return undefined;
  }
}

/** @param {string} dataDir */
function childRecord(dataDir) {
  const file = join(dataDir, 'running.json');
  /** @type {Running[]} */
  let running = [];

  function save() {
    writeFileSync(`${file}.draft`, JSON.stringify(running), { mode: 0o600 });
    renameSync(`${file}.draft`, file);
  }

  return {
    /** @param {string} name @param {NodeJS.Signals} signal @param {number} ceilingMs @param {Identity} [identity] */
    note(name, signal, ceilingMs, identity) {
      // One that ended stays in its place: dead entries are told by their start time, and the order is kept.
      if (!identity) return;
      const at = running.findIndex((entry) => entry.name === name);
      running.splice(at < 0 ? running.length : at, at < 0 ? 0 : 1, { name, identity, signal, ceilingMs });
      save();
    },
    clear: () => rmSync(file, { force: true }),
  };
}

/**
 * Ends what a killed start left running on this data folder, last started first: processes that running.json names by
 * id and start time, and the cluster by its own postmaster.pid. Returns the names of what was ended.
 * @param {string} dataDir
 * @returns {Promise<string[]>}
 */
export async function endLeftOvers(dataDir) {
  const file = join(dataDir, 'running.json');
  /** @type {Running[]} */
  const left = (readJson(file) ?? []).filter((/** @type {Running} */ entry) => isAlive(entry.identity));
  for (const entry of left.toReversed()) await endStranger(entry.identity, entry.signal, entry.ceilingMs);
  await endLeftOverCluster(dataDir);
  rmSync(file, { force: true });
  return left.map((entry) => entry.name);
}
