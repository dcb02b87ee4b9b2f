/** The built web: made when its sources are not those of the last build. */
import { createHash } from 'node:crypto';
import { existsSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { holdFile } from './held-file.mjs';
import { pause } from './ports.mjs';
import { repo } from './repo.mjs';
import { runTask } from './task.mjs';

const WAIT_MS = 500;
const FOLDERS = ['app', 'components', 'db', 'lib', 'public'];
const FILES = [
  'next.config.mjs',
  'postcss.config.mjs',
  'tailwind.config.ts',
  'tsconfig.json',
  'package-lock.json',
  'proxy.ts',
  'instrumentation.ts',
];

/**
 * @typedef {object} WebBuild
 * @property {string} nextDist folder of the build, below the repository
 * @property {string} [logFile]
 * @property {(sentence: string) => void} say
 * @property {AbortSignal} [signal]
 */

/**
 * Builds the web into `nextDist` when it is stale. Waits while another process builds there.
 * @param {WebBuild} build
 */
export async function ensureWebBuild(build) {
  const file = join(repo, `${build.nextDist}.building`);
  let hold = holdFile(file, 'a build');
  while (!hold.release) {
    build.signal?.throwIfAborted();
    await pause(WAIT_MS);
    hold = holdFile(file, 'a build');
  }
  try {
    await buildWhenStale(build);
  } finally {
    hold.release();
  }
}

/** @param {WebBuild} build */
async function buildWhenStale({ nextDist, logFile, say, signal }) {
  const mark = join(repo, nextDist, 'ellwand-sources');
  const sources = hashOfSources();
  if (existsSync(mark) && readFileSync(mark, 'utf8') === sources) return;
  say('Building the web, a minute or so');
  // The mark goes first: a build that is cut short must not pass for one.
  rmSync(mark, { force: true });
  await runTask({
    what: 'The web could not be built',
    command: process.execPath,
    args: [join(repo, 'node_modules/next/dist/bin/next'), 'build'],
    cwd: repo,
    env: {
      ...process.env,
      NODE_ENV: 'production',
      NEXT_TELEMETRY_DISABLED: '1',
      ELLWAND_NEXT_DIST: nextDist,
    },
    logFile,
    signal,
  });
  writeFileSync(mark, sources);
}

function hashOfSources() {
  const hash = createHash('sha256').update(process.version);
  const loose = FILES.filter((file) => existsSync(join(repo, file)));
  for (const path of [...FOLDERS.flatMap(filesBelow), ...loose].sort()) {
    hash
      .update(path)
      .update('\0')
      .update(readFileSync(join(repo, path)))
      .update('\0');
  }
  return hash.digest('hex');
}

/** @param {string} folder @returns {string[]} paths below the repository */
function filesBelow(folder) {
  if (!existsSync(join(repo, folder))) return [];
  return readdirSync(join(repo, folder), { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile())
    .map((entry) => join(entry.parentPath, entry.name).slice(repo.length + 1));
}
