/** Finds what a test run has left behind: everything it starts carries the run's mark in its environment. */
import { readFileSync, readdirSync } from 'node:fs';
import { endStranger, identify } from '../house/process.mjs';

const CEILING_MS = 3000;

/**
 * Ends every process that carries `ELLWAND_TEST_RUN=<run>`, but not this one. Returns their command lines.
 * @param {string} run
 * @returns {Promise<string[]>}
 */
export async function endLeftRunning(run) {
  const found = readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name) && Number(name) !== process.pid)
    .filter((name) => readProc(name, 'environ').split('\0').includes(`ELLWAND_TEST_RUN=${run}`));
  const words = found.map((pid) => readProc(pid, 'cmdline').split('\0').join(' ').trim());
  const identities = found.map((pid) => identify(Number(pid))).filter((identity) => identity !== undefined);
  await Promise.all(identities.map((identity) => endStranger(identity, 'SIGTERM', CEILING_MS)));
  return words.filter(Boolean);
}

/** @param {string} pid @param {string} file @returns {string} empty when it has ended or is not ours to read */
function readProc(pid, file) {
  try {
    return readFileSync(`/proc/${pid}/${file}`, 'utf8');
  } catch {
    return '';
  }
}
