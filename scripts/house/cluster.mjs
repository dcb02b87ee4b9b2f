/** A PostgreSQL cluster of our own below the data folder; the system's clusters are never looked at. */
import { existsSync, mkdirSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { asDatabaseUser, giveToDatabaseUser } from './database-user.mjs';
import { startChild } from './child.mjs';
import { pause, waitForPort } from './ports.mjs';
import { endStranger, identify } from './process.mjs';
import { findCommand, isExecutable, runTask, systemEnvironment } from './task.mjs';
import { Trouble } from './trouble.mjs';

const DEBIAN_VERSIONS = '/usr/lib/postgresql';
const START_TIMEOUT_MS = 60_000;
/** Fast shutdown writes a checkpoint first; see the stop ceilings in house.mjs for the whole of 20 s. */
const STOP_CEILING_MS = 4000;
const LEFT_OVER_CEILING_MS = 20_000;

/** Tests throw their cluster away, so it need not survive a power cut. */
const NOT_DURABLE = ['fsync=off', 'synchronous_commit=off', 'full_page_writes=off'];

/**
 * @typedef {object} ClusterSpec
 * @property {string} dataDir the instance's data folder
 * @property {number} port
 * @property {boolean} durable
 * @property {import('./secrets.mjs').Secrets} secrets
 * @property {(sentence: string) => void} say
 * @property {AbortSignal} [signal]
 * @property {import('./child.mjs').ChildSpec['onChange']} [onChange]
 */

/** @param {string} [major] @returns {string | undefined} the folder of PostgreSQL's programs, newest version first */
export function findPostgres(major) {
  const versions = existsSync(DEBIAN_VERSIONS) ? readdirSync(DEBIAN_VERSIONS) : [];
  const folders = versions
    .sort((a, b) => Number(b) - Number(a))
    .filter((version) => major === undefined || version === major)
    .map((version) => join(DEBIAN_VERSIONS, version, 'bin'));
  const complete = folders.find((folder) =>
    ['initdb', 'postgres'].every((name) => isExecutable(join(folder, name))),
  );
  if (complete) return complete;
  const elsewhere = findCommand('initdb');
  return elsewhere && major === undefined ? join(elsewhere, '..') : undefined;
}

/**
 * Makes the cluster when there is none, and starts it. Returns once it answers.
 * @param {ClusterSpec} spec
 */
export async function startCluster(spec) {
  const folder = join(spec.dataDir, 'postgres');
  const made = existsSync(join(folder, 'PG_VERSION'));
  const programs = programsFor(folder, made);
  if (!made) await makeCluster(spec, folder, programs);
  const child = startChild({
    name: 'PostgreSQL',
    ...asDatabaseUser(folder, join(programs, 'postgres'), ['-D', folder, ...options(spec)]),
    cwd: '/',
    env: systemEnvironment(),
    logFile: join(spec.dataDir, 'log', 'postgres.log'),
    stopSignal: 'SIGINT',
    ceilingMs: STOP_CEILING_MS,
    tied: !spec.durable,
    restart: true,
    say: spec.say,
    onChange: spec.onChange,
  });
  try {
    await waitForPort('127.0.0.1', spec.port, START_TIMEOUT_MS, () => !child.isRunning() || aborted(spec));
    await waitUntilAnswers(spec);
    await makeDatabase(spec);
  } catch (error) {
    await child.stop();
    spec.signal?.throwIfAborted();
    throw new Trouble(`PostgreSQL does not start; see ${join(spec.dataDir, 'log', 'postgres.log')}`, {
      cause: error,
    });
  }
  return child;
}

/** @param {ClusterSpec} spec */
function aborted(spec) {
  return spec.signal?.aborted ?? false;
}

/** @param {string} folder @param {boolean} made */
function programsFor(folder, made) {
  const major = made ? readFileSync(join(folder, 'PG_VERSION'), 'utf8').trim() : undefined;
  const programs = findPostgres(major);
  if (programs) return programs;
  throw new Trouble(
    major
      ? `The data in ${folder} was written by PostgreSQL ${major}, which is not installed.`
      : 'PostgreSQL is not installed.',
  );
}

/** @param {ClusterSpec} spec */
function options(spec) {
  const settings = [
    `port=${spec.port}`,
    'listen_addresses=127.0.0.1',
    // Socket paths have a limit of 107 bytes, and nobody needs one.
    'unix_socket_directories=',
    'max_connections=200',
    'timezone=UTC',
    'log_timezone=UTC',
    ...(spec.durable ? [] : NOT_DURABLE),
  ];
  return settings.flatMap((setting) => ['-c', setting]);
}

/** @param {ClusterSpec} spec @param {string} folder @param {string} programs */
async function makeCluster(spec, folder, programs) {
  // What is there without PG_VERSION is an initdb that was cut short.
  rmSync(folder, { recursive: true, force: true });
  mkdirSync(folder, { mode: 0o700, recursive: true });
  giveToDatabaseUser(folder);
  const passwordFile = join(spec.dataDir, 'postgres-password');
  writeFileSync(passwordFile, spec.secrets.databaseAdmin, { mode: 0o600 });
  giveToDatabaseUser(passwordFile);
  const args = ['-D', folder, '-U', 'postgres', `--pwfile=${passwordFile}`, '--auth=scram-sha-256'];
  const format = ['--encoding=UTF8', '--locale=C.UTF-8', ...(spec.durable ? [] : ['--no-sync'])];
  try {
    await runTask({
      what: 'The database cluster could not be made',
      ...asDatabaseUser(folder, join(programs, 'initdb'), [...args, ...format]),
      cwd: '/',
      env: systemEnvironment(),
      logFile: join(spec.dataDir, 'log', 'postgres.log'),
      signal: spec.signal,
    });
  } finally {
    rmSync(passwordFile, { force: true });
  }
}

/**
 * Runs SQL as the cluster's administrator and returns the rows as psql prints them, unaligned.
 * @param {Pick<ClusterSpec, 'port' | 'secrets' | 'signal'>} spec @param {string} sql @param {string} [database]
 */
export function runSql(spec, sql, database = 'postgres') {
  return runTask({
    what: 'The database refused a statement',
    command: findCommand('psql') ?? 'psql',
    args: [
      '-X',
      '-q',
      '-A',
      '-t',
      '-v',
      'ON_ERROR_STOP=1',
      '-h',
      '127.0.0.1',
      '-p',
      String(spec.port),
    ].concat(['-U', 'postgres', '-d', database, '-f', '-']),
    cwd: '/',
    env: { ...systemEnvironment(), PGPASSWORD: spec.secrets.databaseAdmin, PGCONNECT_TIMEOUT: '5' },
    input: sql,
    signal: spec.signal,
  });
}

/** After a crash the port is open while the log is still being replayed. @param {ClusterSpec} spec */
async function waitUntilAnswers(spec) {
  const deadline = Date.now() + START_TIMEOUT_MS;
  for (;;) {
    try {
      await runSql(spec, 'select 1');
      return;
    } catch (error) {
      if (Date.now() > deadline || aborted(spec)) throw error;
      await pause(200);
    }
  }
}

/** The instance works as a role that owns its database and is no superuser. @param {ClusterSpec} spec */
async function makeDatabase(spec) {
  const password = spec.secrets.database;
  const missing = "select 1 where not exists (select from pg_roles where rolname = 'ellwand')";
  if ((await runSql(spec, missing)).trim()) {
    await runSql(spec, `create role ellwand login createdb password '${password}'`);
  }
  const noDatabase = "select 1 where not exists (select from pg_database where datname = 'ellwand')";
  if ((await runSql(spec, noDatabase)).trim()) await runSql(spec, 'create database ellwand owner ellwand');
}

/**
 * Ends the PostgreSQL that a killed start left behind on this data folder, known by its own postmaster.pid.
 * @param {string} dataDir
 */
export async function endLeftOverCluster(dataDir) {
  const folder = join(dataDir, 'postgres');
  const file = join(folder, 'postmaster.pid');
  if (!existsSync(file)) return;
  const pid = Number(readFileSync(file, 'utf8').split('\n')[0]);
  const identity = Number.isInteger(pid) && pid > 1 ? identify(pid) : undefined;
  if (!identity || !servesFolder(pid, folder)) return;
  await endStranger(identity, 'SIGINT', LEFT_OVER_CEILING_MS);
}

/** @param {number} pid @param {string} folder */
function servesFolder(pid, folder) {
  const words = readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0');
  return words[0]?.endsWith('/postgres') === true && words.includes(folder);
}
