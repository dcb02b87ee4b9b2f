/** `npm run build`: builds the web for this data folder when it is stale, as `npm start` would. */
import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { TEST_NEXT_DIST, readSettings } from './house/settings.mjs';
import { takeLock } from './house/lock.mjs';
import { printTrouble } from './house/trouble.mjs';
import { ensureWebBuild } from './house/web-build.mjs';

const say = console.log;

async function build() {
  if (process.argv.includes('--for-tests')) {
    await ensureWebBuild({ nextDist: TEST_NEXT_DIST, say });
    return;
  }
  const { dataDir, nextDist } = readSettings(process.env, { demo: true });
  // Held, so that the build is not pulled away under a running instance.
  const lock = takeLock(dataDir, 'a build');
  try {
    mkdirSync(join(dataDir, 'log'), { recursive: true });
    await ensureWebBuild({ nextDist, logFile: join(dataDir, 'log', 'build.log'), say });
  } finally {
    lock.release();
  }
}

try {
  await build();
  say('The build is as new as its sources.');
} catch (error) {
  printTrouble(error);
  process.exitCode = 1;
}
