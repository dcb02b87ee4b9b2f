import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { repo } from './repo.mjs';
import { runTask } from './task.mjs';

/**
 * Installs the npm packages when they are missing or are not those of package-lock.json.
 * @param {{say: (sentence: string) => void, signal?: AbortSignal}} options
 */
export async function ensureNpmPackages({ say, signal }) {
  if (areInstalled()) return;
  say('Installing the npm packages');
  await runTask({
    what: 'npm ci failed',
    command: 'npm',
    args: ['ci', '--include=dev', '--no-audit', '--no-fund'],
    cwd: repo,
    signal,
  });
}

/** Compared by version: a checkout gives package-lock.json a new date without a change in it. */
function areInstalled() {
  const installed = versionsIn(join(repo, 'node_modules', '.package-lock.json'));
  const wanted = versionsIn(join(repo, 'package-lock.json'));
  if (!installed || !wanted) return false;
  return [...wanted].every(
    ([path, { version, optional }]) =>
      installed.get(path)?.version === version || (optional && !installed.has(path)),
  );
}

/** @param {string} file @returns {Map<string, {version: string, optional: boolean}> | undefined} by path */
function versionsIn(file) {
  if (!existsSync(file)) return undefined;
  const packages = Object.entries(JSON.parse(readFileSync(file, 'utf8')).packages ?? {});
  return new Map(
    packages
      .filter(([path]) => path !== '')
      .map(([path, { version, optional }]) => [path, { version, optional: optional === true }]),
  );
}
