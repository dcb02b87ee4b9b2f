/** The processes of the house beside its database and queue: how each is started and how long it may take to stop. */
import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { repo } from './repo.mjs';
import { systemEnvironment } from './task.mjs';

/**
 * @typedef {object} Member
 * @property {string} name
 * @property {string} log name of its log file
 * @property {string[]} args of node
 * @property {NodeJS.ProcessEnv} env
 * @property {number} ceilingMs
 */

const run = join(repo, 'scripts', 'run.mjs');
/** An agent lives beside a rig on a small computer: its young heap stays small; 86 MB instead of 125 while cutting. */
const LEAN = ['--max-semi-space-size=1', '--optimize-for-size'];
const nextProgram = join(repo, 'node_modules', 'next', 'dist', 'bin', 'next');

/**
 * @param {import('./settings.mjs').Settings} settings @param {Record<string, string>} own see childEnvironment
 * @returns {Member[]}
 */
export function serverMembers(settings, own) {
  const env = { ...process.env, ...own, NODE_ENV: /** @type {const} */ ('production') };
  const web = [nextProgram, 'start', '-p', String(settings.port), '-H', settings.host];
  return [
    { name: 'mail fake', log: 'mail', args: [run, 'scripts/mail-fake.ts'], env, ceilingMs: 500 },
    // An open event stream keeps the web from ending by itself.
    { name: 'web', log: 'web', args: web, env, ceilingMs: 3000 },
    { name: 'worker', log: 'worker', args: [run, 'lib/jobs/worker.ts'], env, ceilingMs: 4000 },
  ];
}

/**
 * The demo's virtual rigs and the agents beside them, as far as the seed has written their files. They get none of the
 * server's secrets: an agent stands on another computer.
 * @param {string} dataDir
 * @returns {Member[]}
 */
export function floorMembers(dataDir) {
  const folder = join(dataDir, 'demo');
  if (!existsSync(folder)) return [];
  const env = systemEnvironment();
  const files = readdirSync(folder).sort();
  const rigs = files
    .filter((file) => file === 'rigs.json')
    .map((file) => ({
      name: 'virtual rigs',
      log: 'rigs',
      args: [run, 'agent/virtual/bench.ts', '--config', join(folder, file)],
      env,
      ceilingMs: 2000,
    }));
  const agents = files
    .filter((file) => /^agent-\d+\.json$/.test(file))
    .map((file) => ({
      name: file.replace('.json', '').replace('-', ' '),
      log: file.replace('.json', ''),
      args: [...LEAN, run, 'agent/main.ts', '--config', join(folder, file)],
      env,
      ceilingMs: 4000,
    }));
  return [...rigs, ...agents];
}
