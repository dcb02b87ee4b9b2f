import { randomBytes } from 'node:crypto';
import { existsSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { Trouble } from './trouble.mjs';

const NAMES = /** @type {const} */ (['session', 'databaseAdmin', 'database', 'redis']);

/** @typedef {Record<typeof NAMES[number], string>} Secrets */

/**
 * The instance's own secrets, made once and kept in `secrets.json` of its data folder, readable by its owner only.
 * @param {string} dataDir @returns {Secrets}
 */
export function readOrMakeSecrets(dataDir) {
  const file = join(dataDir, 'secrets.json');
  if (existsSync(file)) return parse(file);
  const secrets = Object.fromEntries(NAMES.map((name) => [name, randomBytes(32).toString('hex')]));
  writeFileSync(`${file}.draft`, JSON.stringify(secrets, null, 2), { mode: 0o600 });
  renameSync(`${file}.draft`, file);
  return parse(file);
}

/** @param {string} file @returns {Secrets} */
function parse(file) {
  const stored = JSON.parse(readFileSync(file, 'utf8'));
  for (const name of NAMES) {
    if (typeof stored[name] !== 'string' || stored[name] === '') {
      throw new Trouble(
        `${file} has no "${name}". It belongs to the database beside it: put the right file back.`,
      );
    }
  }
  return stored;
}
