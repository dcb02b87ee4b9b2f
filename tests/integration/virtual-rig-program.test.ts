import { spawn, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, lstatSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { Sender } from './virtual-rig-sender';

let folder: string;
const undo: (() => Promise<unknown> | void)[] = [];

beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'virtual-rig-'));
});

afterEach(async () => {
  for (const step of undo.splice(0).reverse()) await step();
  rmSync(folder, { recursive: true, force: true });
});

function isThere(path: string): boolean {
  return lstatSync(path, { throwIfNoEntry: false }) !== undefined;
}

/** A program that runs, and the lines it prints. */
interface Program {
  child: ChildProcess;
  /** @returns when it has printed this line. */
  hearLine: (wanted: string) => Promise<void>;
  /** @returns its exit code. */
  terminate: () => Promise<unknown>;
}

function startProgram(entry: string, ...args: string[]): Program {
  const child = spawn(process.execPath, ['scripts/run.mjs', entry, ...args], {
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  const ended = once(child, 'exit');
  undo.push(() => {
    child.kill('SIGKILL');
    return ended;
  });
  const lines = createInterface({ input: child.stdout })[Symbol.asyncIterator]();
  const hearLine = async (wanted: string): Promise<void> => {
    for (let line = await lines.next(); line.value !== wanted; line = await lines.next()) {
      if (line.done === true) throw new Error(`ended without saying ${wanted}`);
    }
  };
  const terminate = async (): Promise<unknown> => {
    child.kill('SIGTERM');
    return (await ended)[0];
  };
  return { child, hearLine, terminate };
}

async function openPort(path: string): Promise<Sender> {
  const sender = new Sender(path);
  await sender.open();
  undo.push(() => sender.close());
  await sender.reset();
  return sender;
}

describe('the virtual rig as a program', () => {
  it('ends on SIGTERM with exit code 0 and leaves neither link nor socket', async () => {
    const tty = join(folder, 'tty');
    const control = join(folder, 'control');
    const rig = startProgram('agent/virtual/main.ts', '--tty', tty, '--control', control, '--speed', '20');
    await rig.hearLine(`port: ${tty}`);
    expect(isThere(control)).toBe(true);
    expect(await rig.terminate()).toBe(0);
    expect([isThere(tty), isThere(control)]).toEqual([false, false]);
  });

  it('takes its socat with it when it is killed', async () => {
    const tty = join(folder, 'tty');
    const rig = startProgram('agent/virtual/main.ts', '--tty', tty, '--no-reset-on-open');
    await rig.hearLine(`port: ${tty}`);
    await openPort(tty);
    rig.child.kill('SIGKILL');
    // The link stays, and leads nowhere once socat is gone. A pseudo-terminal's end has no event to wait for:
    // serialport leaves out its `close` now and then.
    await expect.poll(() => existsSync(tty)).toBe(false);
    expect(isThere(tty)).toBe(true);
  });

  it('prints what its display shows, for a learner without a machine', async () => {
    const tty = join(folder, 'tty');
    const rig = startProgram('agent/virtual/main.ts', '--tty', tty, '--no-reset-on-open');
    await rig.hearLine(`port: ${tty}`);
    await (await openPort(tty)).run('M117 code 4711');
    await rig.hearLine('display: code 4711');
  });

  it('takes its settings from a file, and flags win over it', async () => {
    const tty = join(folder, 'tty');
    const config = join(folder, 'rig.json');
    writeFileSync(
      config,
      JSON.stringify({ tty: 'elsewhere', resetOnOpen: false, firmware: { beeper: false } }),
    );
    const rig = startProgram('agent/virtual/main.ts', '--config', config, '--tty', tty, '--no-display');
    await rig.hearLine(`port: ${tty}`);
    const sender = await openPort(tty);
    expect((await sender.run('M117 1'))[0]).toMatch(/^echo:Unknown/);
    expect((await sender.run('M300'))[0]).toMatch(/^echo:Unknown/);
  });
});

describe('a bench of virtual rigs in one process', () => {
  it('has a port for each rig, and takes all of them away on SIGTERM', async () => {
    const config = join(folder, 'bench.json');
    const ttys = [1, 2, 3].map((rig) => join(folder, `tty${rig}`));
    writeFileSync(
      config,
      JSON.stringify({ rigs: ttys.map((tty) => ({ tty, speed: 20, resetOnOpen: false })) }),
    );
    const bench = startProgram('agent/virtual/bench.ts', '--config', config);
    await bench.hearLine('ready: 3 virtual rigs');
    for (const tty of ttys) expect((await (await openPort(tty)).run('M114'))[0]).toMatch(/^X:0\.00/);
    expect(await bench.terminate()).toBe(0);
    expect(ttys.map(isThere)).toEqual([false, false, false]);
  });
});
