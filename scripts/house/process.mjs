/** What the kernel says about processes, and ways to end only those that are surely ours. */
import { readFileSync } from 'node:fs';
import { pause } from './ports.mjs';

/**
 * A process beyond doubt: ids are used again, a start time together with one is not.
 * @typedef {{pid: number, startedTicks: string, bootId: string}} Identity
 */

const bootId = readFileSync('/proc/sys/kernel/random/boot_id', 'utf8').trim();

/** @param {number} pid @returns {Identity | undefined} undefined when there is no such process, or only a zombie */
export function identify(pid) {
  try {
    const line = readFileSync(`/proc/${pid}/stat`, 'utf8');
    // The name in parentheses may hold blanks; the fields after it do not.
    const fields = line.slice(line.lastIndexOf(')') + 2).split(' ');
    const startedTicks = fields[19];
    if (fields[0] === 'Z' || startedTicks === undefined) return undefined;
    return { pid, startedTicks, bootId };
  } catch {
    return undefined;
  }
}

/** @param {Identity} identity */
export function isAlive(identity) {
  const now = identify(identity.pid);
  return now?.startedTicks === identity.startedTicks && now.bootId === identity.bootId;
}

/**
 * Signals the process group that `pid` leads. Nothing happens when it is gone; false then.
 * @param {number} pid @param {NodeJS.Signals} signal
 */
export function signalGroup(pid, signal) {
  return send(-pid, signal);
}

/** @param {number} target @param {NodeJS.Signals} signal */
function send(target, signal) {
  try {
    process.kill(target, signal);
    return true;
  } catch (error) {
    if (error instanceof Error && 'code' in error && error.code === 'ESRCH') return false;
    throw error;
  }
}

/**
 * Ends a process that is not our child: asks with `signal`, insists with SIGKILL after `ceilingMs`.
 * @param {Identity} identity @param {NodeJS.Signals} signal @param {number} ceilingMs
 */
export async function endStranger(identity, signal, ceilingMs) {
  if (!isAlive(identity)) return;
  signalProcess(identity.pid, signal);
  const deadline = Date.now() + ceilingMs;
  while (isAlive(identity) && Date.now() < deadline) await pause(50);
  if (isAlive(identity)) signalProcess(identity.pid, 'SIGKILL');
  while (isAlive(identity)) await pause(20);
}

/** @param {number} pid @param {NodeJS.Signals} signal its group when it leads one, else only itself */
function signalProcess(pid, signal) {
  if (!signalGroup(pid, signal)) send(pid, signal);
}
