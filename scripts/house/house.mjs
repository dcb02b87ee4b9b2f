/** The whole of Ellwand on one computer: started from nothing, stopped in order. */
import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { startChild } from './child.mjs';
import { startCluster } from './cluster.mjs';
import { waitUntilHealthy } from './health.mjs';
import { endLeftOvers, takeLock } from './lock.mjs';
import { floorMembers, serverMembers } from './members.mjs';
import { startRedis } from './redis.mjs';
import { repo } from './repo.mjs';
import { readOrMakeSecrets } from './secrets.mjs';
import { childEnvironment, spokenHost } from './settings.mjs';
import { refuseTakenPorts } from './taken-ports.mjs';
import { runTask } from './task.mjs';
import { ensureWebBuild } from './web-build.mjs';

/** @typedef {import('./settings.mjs').Settings} Settings */
/** @typedef {import('./child.mjs').Child} Child */

/**
 * @typedef {object} House
 * @property {Settings} settings
 * @property {string} url
 * @property {Record<string, string>} env what the web and the worker find in their environment
 * @property {(name: string) => Child} child by name: "PostgreSQL", "Redis", "mail fake", "web", "worker", "virtual rigs", "agent 1"
 * @property {() => string[]} names of all children
 * @property {() => Promise<void>} stop ends all of it in order, each with a ceiling, under 20 s together
 */

/**
 * @typedef {object} Start
 * @property {Settings} settings
 * @property {(sentence: string) => void} say
 * @property {AbortSignal} [signal] gives the start up, and ends what was started
 */

/**
 * Starts PostgreSQL, Redis, mail fake, web, worker and, where the seed has made a demo, virtual rigs and agents.
 * Throws a Trouble a person can act on; nothing runs then.
 * @param {Start} start
 * @returns {Promise<House>}
 */
export async function startHouse(start) {
  const { settings } = start;
  const url = `http://${spokenHost(settings.host)}:${settings.port}`;
  const lock = takeLock(settings.dataDir, url);
  /** @type {Child[]} */
  const children = [];

  /** @type {Promise<void> | undefined} */
  let stopped;
  const stop = () => {
    stopped ??= stopInOrder(children).finally(() => {
      lock.record.clear();
      lock.release();
    });
    return stopped;
  };
  try {
    const env = await raise({ ...start, url, children, record: lock.record });
    return {
      settings,
      url,
      env,
      child: (name) => find(children, name),
      names: () => children.map((c) => c.name),
      stop,
    };
  } catch (error) {
    await stop();
    throw error;
  }
}

/** @param {Child[]} children @param {string} name */
function find(children, name) {
  const child = children.find((one) => one.name === name);
  if (!child) throw new Error(`The house has no "${name}"`);
  return child;
}

/**
 * Backwards, the agents together: what uses a thing ends before the thing.
 * @param {Child[]} children
 */
async function stopInOrder(children) {
  const backwards = children.toReversed();
  const isAgent = (/** @type {Child} */ child) => child.name.startsWith('agent ');
  await Promise.all(backwards.filter(isAgent).map((child) => child.stop()));
  for (const child of backwards) if (!isAgent(child)) await child.stop();
}

/** @typedef {Start & {url: string, children: Child[], record: ReturnType<typeof takeLock>['record']}} Raising */

/** @param {Raising} raising */
async function raise(raising) {
  const { settings, say, signal, children, url } = raising;
  const { dataDir } = settings;
  const left = await endLeftOvers(dataDir);
  if (left.length > 0) say(`Ended what an earlier start had left running: ${left.join(', ')}`);
  await refuseTakenPorts(settings);
  mkdirSync(join(dataDir, 'log'), { recursive: true });
  await ensureWebBuild({
    nextDist: settings.nextDist,
    logFile: join(dataDir, 'log', 'build.log'),
    say,
    signal,
  });

  const secrets = readOrMakeSecrets(dataDir);
  const { dbPort, redisPort, durable } = settings;
  const common = { dataDir, say, signal };
  say('Starting PostgreSQL and Redis');
  children.push(
    await startCluster({
      ...common,
      port: dbPort,
      durable,
      secrets,
      onChange: noteAs(raising, 'PostgreSQL', 'SIGINT'),
    }),
  );
  children.push(
    await startRedis({
      ...common,
      port: redisPort,
      password: secrets.redis,
      tied: !durable,
      onChange: noteAs(raising, 'Redis', 'SIGTERM'),
    }),
  );

  const env = childEnvironment(repo, settings, secrets);
  await fillDatabase(raising, env);
  say('Starting mail fake, web and worker');
  for (const member of serverMembers(settings, env)) children.push(startMember(raising, member));
  await waitUntilHealthy(url, signal);
  const floor = floorMembers(dataDir);
  if (floor.length > 0) say('Starting the virtual rigs and their agents');
  for (const member of floor) children.push(startMember(raising, member));
  return env;
}

/** @param {Raising} raising @param {string} name @param {NodeJS.Signals} signal @param {number} [ceilingMs] */
function noteAs({ record }, name, signal, ceilingMs = 4000) {
  return (/** @type {import('./process.mjs').Identity | undefined} */ identity) =>
    record.note(name, signal, ceilingMs, identity);
}

/** @param {Raising} raising @param {import('./members.mjs').Member} member */
function startMember(raising, member) {
  return startChild({
    name: member.name,
    command: process.execPath,
    args: member.args,
    cwd: repo,
    env: member.env,
    logFile: join(raising.settings.dataDir, 'log', `${member.log}.log`),
    stopSignal: 'SIGTERM',
    ceilingMs: member.ceilingMs,
    tied: !raising.settings.durable,
    restart: true,
    say: raising.say,
    onChange: noteAs(raising, member.name, 'SIGTERM', member.ceilingMs),
  });
}

/** @param {Raising} raising @param {Record<string, string>} own */
async function fillDatabase({ settings, say, signal }, own) {
  const env = { ...process.env, ...own, NODE_ENV: /** @type {const} */ ('production') };
  const entry = join(repo, 'scripts', 'run.mjs');
  const common = { command: process.execPath, cwd: repo, env, signal };
  const logFile = join(settings.dataDir, 'log', 'database.log');
  say('Bringing the database to the newest schema');
  await runTask({ ...common, logFile, what: 'The migrations failed', args: [entry, 'scripts/migrate.ts'] });
  const seed = ['db/seed/main.ts', ...(settings.demo ? [] : ['--no-demo'])];
  await runTask({ ...common, what: 'The first data could not be written', args: [entry, ...seed] });
}
