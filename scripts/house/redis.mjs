import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { startChild } from './child.mjs';
import { waitForPort } from './ports.mjs';
import { findCommand, systemEnvironment } from './task.mjs';
import { Trouble } from './trouble.mjs';

const START_TIMEOUT_MS = 20_000;
const STOP_CEILING_MS = 2000;

/**
 * @typedef {object} RedisSpec
 * @property {string} dataDir the instance's data folder
 * @property {number} port
 * @property {string} password
 * @property {(sentence: string) => void} say
 * @property {boolean} [tied] see child.mjs
 * @property {AbortSignal} [signal]
 * @property {import('./child.mjs').ChildSpec['onChange']} [onChange]
 */

/**
 * Starts a Redis of our own with an append-only file. Returns once it accepts connections.
 * @param {RedisSpec} spec
 */
export async function startRedis(spec) {
  const folder = join(spec.dataDir, 'redis');
  mkdirSync(folder, { recursive: true, mode: 0o700 });
  // In a file and not in the arguments, where everybody on this computer could read the password.
  const config = join(folder, 'redis.conf');
  writeFileSync(config, configuration(spec, folder), { mode: 0o600 });
  const child = startChild({
    name: 'Redis',
    command: findCommand('redis-server') ?? 'redis-server',
    args: [config],
    cwd: '/',
    env: systemEnvironment(),
    logFile: join(spec.dataDir, 'log', 'redis.log'),
    stopSignal: 'SIGTERM',
    ceilingMs: STOP_CEILING_MS,
    tied: spec.tied ?? false,
    restart: true,
    say: spec.say,
    onChange: spec.onChange,
  });
  try {
    const gaveUp = () => !child.isRunning() || (spec.signal?.aborted ?? false);
    await waitForPort('127.0.0.1', spec.port, START_TIMEOUT_MS, gaveUp);
  } catch (error) {
    await child.stop();
    spec.signal?.throwIfAborted();
    throw new Trouble(`Redis does not start; see ${join(spec.dataDir, 'log', 'redis.log')}`, {
      cause: error,
    });
  }
  return child;
}

/** @param {RedisSpec} spec @param {string} folder */
function configuration(spec, folder) {
  const lines = [
    'bind 127.0.0.1',
    `port ${spec.port}`,
    `dir ${JSON.stringify(folder)}`,
    `requirepass ${spec.password}`,
    'appendonly yes',
    'appendfsync everysec',
    'save ""',
    // The queue must never lose keys silently when memory runs short.
    'maxmemory-policy noeviction',
    'daemonize no',
  ];
  return `${lines.join('\n')}\n`;
}
