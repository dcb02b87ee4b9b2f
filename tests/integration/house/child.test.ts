import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, expect, it, vi } from 'vitest';
import { startChild } from '@/scripts/house/child.mjs';
import { systemEnvironment } from '@/scripts/house/task.mjs';
import { identify, isAlive, type Identity } from '@/scripts/house/process.mjs';

const folder = mkdtempSync(join(tmpdir(), 'ellwand-child-'));
const children: ReturnType<typeof startChild>[] = [];

afterEach(async () => {
  for (const child of children.splice(0)) await child.stop();
  rmSync(folder, { recursive: true, force: true });
});

/** A child that runs `code` in node; what is said about it is collected, and so is each of its processes. */
function run(code: string, options: { restart?: boolean; ceilingMs?: number } = {}) {
  const said: string[] = [];
  const lives: Identity[] = [];
  const logFile = join(folder, 'child.log');
  const child = startChild({
    name: 'probe',
    command: process.execPath,
    args: ['-e', code],
    cwd: folder,
    env: systemEnvironment(),
    logFile,
    stopSignal: 'SIGTERM',
    ceilingMs: options.ceilingMs ?? 5000,
    tied: true,
    restart: options.restart ?? true,
    say: (sentence) => said.push(sentence),
    onChange: (identity) => identity && lives.push(identity),
  });
  children.push(child);
  const logged = (text: string) =>
    vi.waitFor(() => expect(readFileSync(logFile, 'utf8')).toContain(text), { timeout: 10_000 });
  return { child, said, lives, logged };
}

it('starts a child again when it dies, says so, and waits longer each time', async () => {
  const { said, lives } = run('process.exit(3)');
  await vi.waitFor(() => expect(lives.length).toBeGreaterThanOrEqual(3), { timeout: 15_000 });
  expect(said[0]).toContain('probe has ended (code 3); starting it again in 0.5 s');
  expect(said[1]).toContain('starting it again in 1 s');
});

it('does not start it again once it was told to stop', async () => {
  const { child, said, lives, logged } = run("console.log('up'); setInterval(() => {}, 1000)");
  await logged('up');
  await child.stop();
  expect(child.isRunning()).toBe(false);
  expect(said).toEqual([]);
  expect(lives.some(isAlive)).toBe(false);
});

it('kills what ignores its signal, after the ceiling', async () => {
  const { child, lives, logged } = run(
    "process.on('SIGTERM', () => console.log('heard')); console.log('up'); setInterval(() => {}, 1000)",
    { ceilingMs: 300 },
  );
  await logged('up');
  await child.stop();
  await logged('heard');
  expect(lives.some(isAlive)).toBe(false);
});

it('takes along what a child has started and left behind', async () => {
  const { child, logged } = run(
    "const c = require('child_process').spawn('sleep', ['600']); console.log('pid', c.pid, '.');" +
      'setInterval(() => {}, 1000)',
  );
  await logged(' .');
  const pid = Number(/pid (\d+) \./.exec(readFileSync(join(folder, 'child.log'), 'utf8'))?.[1]);
  const grandchild = identify(pid);
  if (!grandchild) throw new Error('The grandchild was not seen');
  await child.stop();
  await vi.waitFor(() => expect(isAlive(grandchild)).toBe(false));
});
