/** `npm start [-- --no-demo]`: everything from nothing, until Ctrl-C or SIGTERM. Needs no npm package itself. */
import { ensureDebianPackages, servicePackages } from './house/debian.mjs';
import { readDemoAccounts } from './house/demo.mjs';
import { startHouse } from './house/house.mjs';
import { ensureNpmPackages } from './house/npm.mjs';
import { readSettings } from './house/settings.mjs';
import { Trouble, printTrouble } from './house/trouble.mjs';

const KNOWN = ['--no-demo'];
const stopping = new AbortController();

/** @param {string} sentence */
function say(sentence) {
  console.log(sentence);
}

/** @param {string[]} args */
async function start(args) {
  const unknown = args.find((arg) => !KNOWN.includes(arg));
  if (unknown) throw new Trouble(`There is no option ${unknown}. Known: ${KNOWN.join(', ')}`);
  const settings = readSettings(process.env, { demo: !args.includes('--no-demo') });
  const { signal } = stopping;
  await ensureNpmPackages({ say, signal });
  await ensureDebianPackages(servicePackages, { say, signal });
  const house = await startHouse({ settings, say, signal });
  tellAddress(house);
  await untilAborted(signal);
  say('Stopping');
  await house.stop();
  say('Stopped.');
}

/** @param {import('./house/house.mjs').House} house */
function tellAddress({ settings }) {
  const demo = readDemoAccounts(settings.dataDir);
  say(`\nEllwand runs at ${settings.publicUrl}`);
  if (demo) {
    say(`\nDemo accounts, password ${demo.password}`);
    for (const { email, roles } of demo.accounts) say(`  ${email.padEnd(28)} ${roles.join(', ')}`);
    if (!settings.demo) say('\nThis data folder already holds the demo, so --no-demo changes nothing.');
  } else {
    say('An empty workshop: the first page makes its first owner.');
  }
  say(`\nLogs, mails and data are in ${settings.dataDir}. Ctrl-C stops everything.\n`);
}

/** @param {AbortSignal} signal @returns {Promise<void>} */
function untilAborted(signal) {
  if (signal.aborted) return Promise.resolve();
  return new Promise((done) => signal.addEventListener('abort', () => done(), { once: true }));
}

for (const name of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(name, () => stopping.abort(new Trouble('Stopped before everything was up.')));
}

// Whoever reads our words may go away (a closed terminal, `| head`); what runs must still be stopped in order.
for (const stream of [process.stdout, process.stderr]) stream.on('error', () => undefined);
process.on('uncaughtException', (error) => {
  printTrouble(error);
  process.exitCode = 1;
  stopping.abort(error);
});

try {
  await start(process.argv.slice(2));
} catch (error) {
  printTrouble(error);
  process.exitCode = 1;
}
