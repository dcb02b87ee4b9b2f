/**
 * The rooms of the house and what each may know: the import directions as data, read by eslint.config.mjs.
 * A path that is not listed in `knows` is forbidden, so a new folder starts with nothing.
 */
import { readdirSync } from 'node:fs';
import { DATABASE, FRAMEWORK, MAIL, NODE, QUEUE, SERIAL } from './packages.mjs';

/**
 * @typedef {object} Room
 * @property {string} name Spoken in the message of a broken rule.
 * @property {string[]} files Globs of the room's files.
 * @property {string[]} [butNot] Globs taken out of `files`.
 * @property {string[]} own Folders and files that make up the room itself.
 * @property {string[]} knows Other folders and files it may import.
 * @property {RegExp} [onlyPackages] When set, packages outside this pattern are forbidden.
 * @property {RegExp[]} [noPackages] Packages that are forbidden.
 * @property {boolean} [timeless] No clock, no randomness.
 * @property {boolean} [readsEnvironment] May read process.env; everywhere else the environment is parsed already.
 * @property {boolean} [still] No I/O global at all (timers, fetch, console, process).
 */

const root = new URL('../../', import.meta.url);

/** @param {string} folder @returns {string[]} the TypeScript files that lie directly in it */
function looseFiles(folder) {
  return readdirSync(new URL(folder, root))
    .filter((name) => name.endsWith('.ts'))
    .map((name) => `${folder}${name}`);
}

const pureFolders = ['wire', 'program', 'fleet', 'plan', 'wear', 'quality', 'protocol', 'schemas'].map(
  (name) => `lib/${name}`,
);
export const pure = [...pureFolders, ...looseFiles('lib/')];

const agentConfig = ['agent/config.ts', 'agent/config/**'];

/** @type {Room[]} */
export const rooms = [
  {
    name: 'the pure rooms',
    files: [...pureFolders.map((folder) => `${folder}/**`), 'lib/*.ts'],
    own: pure,
    knows: [],
    onlyPackages: /^zod(\/|$)/,
    timeless: true,
    still: true,
  },
  {
    name: 'lib/queries',
    files: ['lib/queries/**'],
    own: ['lib/queries'],
    knows: pure,
    onlyPackages: /^(zod|@tanstack\/react-query)(\/|$)/,
  },
  {
    name: 'lib/env',
    files: ['lib/env/**'],
    own: ['lib/env'],
    knows: pure,
    readsEnvironment: true,
    onlyPackages: /^zod(\/|$)/,
  },
  {
    name: 'lib/services',
    files: ['lib/services/**'],
    own: ['lib/services'],
    knows: ['db', 'lib/env', ...pure],
    noPackages: [QUEUE, SERIAL, MAIL, FRAMEWORK],
    timeless: true,
  },
  {
    name: 'lib/auth',
    files: ['lib/auth/**'],
    own: ['lib/auth'],
    knows: ['db', 'lib/services', 'lib/env', ...pure],
    noPackages: [QUEUE, SERIAL],
  },
  {
    name: 'lib/http',
    files: ['lib/http/**'],
    own: ['lib/http'],
    knows: ['lib/auth', 'lib/services', 'lib/live', 'lib/env', ...pure],
    noPackages: [QUEUE, SERIAL, DATABASE],
  },
  {
    name: 'lib/live',
    files: ['lib/live/**'],
    own: ['lib/live'],
    knows: ['lib/auth', 'lib/services', 'lib/env', ...pure],
    noPackages: [QUEUE, SERIAL, DATABASE, MAIL, FRAMEWORK],
  },
  {
    name: 'lib/jobs',
    files: ['lib/jobs/**'],
    own: ['lib/jobs'],
    knows: ['lib/services', 'lib/env', ...pure],
    noPackages: [SERIAL, DATABASE, FRAMEWORK],
  },
  {
    name: 'components',
    files: ['components/**'],
    own: ['components'],
    knows: ['lib/queries', 'public', ...pure],
    noPackages: [QUEUE, SERIAL, DATABASE, MAIL, NODE],
  },
  {
    name: 'app',
    files: ['app/**', 'proxy.ts', 'instrumentation.ts'],
    own: ['app', 'proxy.ts', 'instrumentation.ts'],
    knows: [
      'components',
      'public',
      'lib/services',
      'lib/queries',
      'lib/auth',
      'lib/http',
      'lib/live',
      'lib/env',
      ...pure,
    ],
    noPackages: [QUEUE, SERIAL, DATABASE, MAIL],
  },
  {
    name: 'db',
    files: ['db/**'],
    butNot: ['db/seed/**'],
    own: ['db'],
    knows: ['lib/env', ...pure],
    noPackages: [QUEUE, SERIAL, FRAMEWORK],
  },
  {
    name: 'db/seed',
    files: ['db/seed/**'],
    own: ['db'],
    knows: ['lib/services', 'lib/auth', 'lib/env', ...pure],
    noPackages: [QUEUE, SERIAL, FRAMEWORK],
  },
  {
    name: 'agent',
    files: ['agent/**'],
    butNot: ['agent/virtual/**', ...agentConfig],
    own: agentParts(),
    knows: pure,
    noPackages: [QUEUE, DATABASE, MAIL, FRAMEWORK],
  },
  {
    name: "the agent's configuration",
    files: agentConfig,
    own: agentParts(),
    knows: pure,
    noPackages: [QUEUE, DATABASE, MAIL, FRAMEWORK],
    readsEnvironment: true,
  },
  {
    name: 'the virtual rig',
    files: ['agent/virtual/**'],
    own: ['agent/virtual'],
    knows: pure,
    noPackages: [QUEUE, DATABASE, MAIL, FRAMEWORK, SERIAL],
  },
];

/** Everything of the agent but the virtual rig: neither may lean on the other's reading of the protocol. */
function agentParts() {
  return readdirSync(new URL('agent/', root))
    .filter((name) => name !== 'virtual')
    .map((name) => `agent/${name}`);
}
