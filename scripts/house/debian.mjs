/** Debian packages that the house needs: looked up by their programs, installed when missing. */
import { existsSync, rmSync, writeFileSync } from 'node:fs';
import { findPostgres } from './cluster.mjs';
import { isRoot } from './database-user.mjs';
import { findCommand, runTask } from './task.mjs';
import { Trouble } from './trouble.mjs';

/** @typedef {{name: string, isThere: () => boolean}} DebianPackage */

/** @type {DebianPackage[]} */
export const servicePackages = [
  { name: 'postgresql', isThere: () => findPostgres() !== undefined && findCommand('psql') !== undefined },
  { name: 'redis-server', isThere: () => findCommand('redis-server') !== undefined },
  { name: 'socat', isThere: () => findCommand('socat') !== undefined },
];

/** @type {DebianPackage} */
export const chromiumPackage = { name: 'chromium', isThere: () => findCommand('chromium') !== undefined };

/** Debian asks this file whether a package may start its service while it is being installed. */
const POLICY = '/usr/sbin/policy-rc.d';

/**
 * Installs what is missing when we are root, else throws a Trouble with the one line to run.
 * @param {DebianPackage[]} packages
 * @param {{say: (sentence: string) => void, signal?: AbortSignal}} options
 */
export async function ensureDebianPackages(packages, { say, signal }) {
  const missing = packages.filter((entry) => !entry.isThere()).map((entry) => entry.name);
  if (missing.length === 0) return;
  if (!isRoot || !findCommand('apt-get')) {
    throw new Trouble(
      `These Debian packages are missing. Run this once, then start again:\n\n  sudo sh -c '${oneLine(missing)}'`,
    );
  }
  say(`Installing from Debian: ${missing.join(', ')}`);
  await withoutServices(() => install(missing, signal));
  const still = packages.filter((entry) => !entry.isThere()).map((entry) => entry.name);
  if (still.length > 0) throw new Trouble(`Still missing after their installation: ${still.join(', ')}`);
}

/** @param {string[]} names */
function oneLine(names) {
  return `apt-get update && apt-get install -y --no-install-recommends ${names.join(' ')}`;
}

/** @param {string[]} names @param {AbortSignal} [signal] */
async function install(names, signal) {
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' };
  const common = { command: 'apt-get', cwd: '/', env, signal };
  await runTask({ ...common, what: 'apt-get update failed', args: ['update'] });
  const args = ['install', '-y', '--no-install-recommends', ...names];
  await runTask({ ...common, what: 'apt-get install failed', args });
}

/**
 * The packages would start a PostgreSQL and a Redis of the system's own, which nobody asked for: they are told not to
 * while they are installed.
 * @param {() => Promise<void>} work
 */
async function withoutServices(work) {
  const ours = !existsSync(POLICY);
  if (ours) writeFileSync(POLICY, '#!/bin/sh\nexit 101\n', { mode: 0o755 });
  try {
    await work();
  } finally {
    if (ours) rmSync(POLICY, { force: true });
  }
}
