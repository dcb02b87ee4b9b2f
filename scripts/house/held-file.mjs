/** A file that one living process holds; what a killed one has left is taken over. */
import { linkSync, mkdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { identify, isAlive } from './process.mjs';

/**
 * @typedef {object} Hold
 * @property {import('./process.mjs').Identity | undefined} identity of the process that holds the file
 * @property {string} note what it wants to tell others
 */

/**
 * Holds `file` for this process. Returns how to let go, or who else holds it and still lives.
 * @param {string} file @param {string} note
 * @returns {{release: () => void, holder?: undefined} | {release?: undefined, holder: Hold}}
 */
export function holdFile(file, note) {
  mkdirSync(dirname(file), { recursive: true });
  const draft = `${file}.${process.pid}`;
  writeFileSync(draft, JSON.stringify({ identity: identify(process.pid), note }), { mode: 0o600 });
  try {
    // A link is made by one process only, and what it shows is complete.
    while (!tryLink(draft, file)) {
      const holder = readHold(file);
      if (holder?.identity && isAlive(holder.identity)) return { holder };
      rmSync(file, { force: true });
    }
    return { release: () => rmSync(file, { force: true }) };
  } finally {
    rmSync(draft, { force: true });
  }
}

/** @param {string} from @param {string} to */
function tryLink(from, to) {
  try {
    linkSync(from, to);
    return true;
  } catch (error) {
    if (error instanceof Error && 'code' in error && error.code === 'EEXIST') return false;
    throw error;
  }
}

/** @param {string} file @returns {Hold | undefined} undefined when it is gone or was cut short */
function readHold(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'));
  } catch {
    return undefined;
  }
}
