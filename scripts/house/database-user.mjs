/** PostgreSQL refuses to run as root: then its commands run as the user that Debian's package made for it. */
import { spawnSync } from 'node:child_process';
import { chownSync, readFileSync } from 'node:fs';
import { Trouble } from './trouble.mjs';

const USER = 'postgres';
/** Bits of the kernel's capability masks that let a process pass a folder closed to its user. */
const PASSES = [
  { name: 'dac_override', bit: 1n },
  { name: 'dac_read_search', bit: 2n },
];

export const isRoot = process.getuid?.() === 0;

/**
 * Hands `path` (a folder or file made by us) to the database's user. Nothing to do when not root.
 * @param {string} path
 */
export function giveToDatabaseUser(path) {
  if (!isRoot) return;
  chownSync(path, idOf('-u'), idOf('-g'));
}

/** @param {'-u' | '-g'} which */
function idOf(which) {
  const result = spawnSync('id', [which, USER], { encoding: 'utf8' });
  const id = Number(result.stdout);
  if (result.status !== 0 || !Number.isInteger(id)) {
    throw new Trouble(`There is no user "${USER}", as which PostgreSQL should run.`);
  }
  return id;
}

/**
 * The command line that runs `command` as the database's user with access to `folder`: as it is when we are not
 * root, else by setpriv, with capabilities only when the folder lies in one that is closed to that user.
 * Throws a Trouble when even those do not open it.
 * @param {string} folder @param {string} command @param {string[]} args @returns {{command: string, args: string[]}}
 */
export function asDatabaseUser(folder, command, args) {
  if (!isRoot) return { command, args };
  const plain = ['--reuid', USER, '--regid', USER, '--init-groups'];
  const raised = [...plain, ...raisedCapabilities()];
  for (const options of [plain, raised]) {
    // Really opened: access(2), which `test` asks, ignores ambient capabilities.
    if (spawnSync('setpriv', [...options, 'ls', folder], { cwd: '/' }).status === 0) {
      return { command: 'setpriv', args: [...options, command, ...args] };
    }
  }
  throw new Trouble(
    `The user "${USER}", as which PostgreSQL runs, cannot reach ${folder}. ` +
      'Set ELLWAND_DATA_DIR to a folder that it can reach, for example below /var/lib.',
  );
}

/** Only what this system still grants: containers often keep one of the two. */
function raisedCapabilities() {
  const line = readFileSync('/proc/self/status', 'utf8').match(/^CapBnd:\s*([0-9a-f]+)$/m);
  const granted = BigInt(`0x${line?.[1] ?? '0'}`);
  const names = PASSES.filter((capability) => granted & (1n << capability.bit)).map(({ name }) => `+${name}`);
  if (names.length === 0) return [];
  return ['--inh-caps', names.join(','), '--ambient-caps', names.join(',')];
}
