import { spawn } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { endLeftOvers, takeLock } from '@/scripts/house/lock.mjs';
import { identify, isAlive, type Identity } from '@/scripts/house/process.mjs';
import { Trouble } from '@/scripts/house/trouble.mjs';

let dataDir = '';
beforeEach(() => {
  dataDir = mkdtempSync(join(tmpdir(), 'ellwand-lock-'));
});
const strangers: Identity[] = [];
afterEach(() => {
  for (const stranger of strangers.splice(0)) if (isAlive(stranger)) process.kill(stranger.pid, 'SIGKILL');
  rmSync(dataDir, { recursive: true, force: true });
});

/** A process of its own group, as a killed start leaves them. */
function leaveRunning(): Identity {
  const { pid } = spawn('sleep', ['600'], { detached: true, stdio: 'ignore' });
  const identity = pid === undefined ? undefined : identify(pid);
  if (!identity) throw new Error('It did not start');
  strangers.push(identity);
  return identity;
}

it('lets one start hold a data folder, and tells the second which process does', () => {
  const lock = takeLock(dataDir, 'http://one.example');
  expect(() => takeLock(dataDir, 'http://two.example')).toThrow(Trouble);
  expect(() => takeLock(dataDir, 'http://two.example')).toThrow(`process ${process.pid}, http://one.example`);
  lock.release();
  takeLock(dataDir, 'http://two.example').release();
});

it('takes over from a start that was killed, even when its number is used again', () => {
  takeLock(dataDir, 'http://one.example');
  const file = join(dataDir, 'start.lock');
  const stored = JSON.parse(readFileSync(file, 'utf8')) as { identity: Identity };
  // The same number, but a process that started at another time: not the one that wrote this.
  writeFileSync(file, JSON.stringify({ ...stored, identity: { ...stored.identity, startedTicks: '1' } }));
  takeLock(dataDir, 'http://two.example').release();
});

it('takes over a lock that was cut short while being written', () => {
  writeFileSync(join(dataDir, 'start.lock'), '{"identity":');
  takeLock(dataDir, 'http://two.example').release();
});

it('ends what a killed start left running, and nothing that merely has its number', async () => {
  const lock = takeLock(dataDir, 'http://one.example');
  const left = leaveRunning();
  const other = leaveRunning();
  lock.record.note('web', 'SIGTERM', 1000, left);
  lock.record.note('worker', 'SIGTERM', 1000, { ...other, startedTicks: '1' });
  expect(await endLeftOvers(dataDir)).toEqual(['web']);
  expect(isAlive(left)).toBe(false);
  expect(isAlive(other)).toBe(true);
});

it('has nothing to end where nothing was left', async () => {
  expect(await endLeftOvers(dataDir)).toEqual([]);
});
