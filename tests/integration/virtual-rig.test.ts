import { once } from 'node:events';
import { lstatSync, mkdtempSync, readFileSync, rmSync, watch } from 'node:fs';
import { createConnection } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { createVirtualRig, type VirtualRig } from '@/agent/virtual/rig';
import type { TallyLine } from '@/agent/virtual/tally';
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

async function startRig(options: { resetOnOpen: boolean }): Promise<VirtualRig> {
  const rig = createVirtualRig({
    tty: join(folder, 'tty'),
    control: join(folder, 'control'),
    tally: join(folder, 'tally.jsonl'),
    speed: 20,
    ...options,
  });
  undo.push(() => rig.stop());
  await rig.start();
  return rig;
}

function readTally(): TallyLine[] {
  const lines = readFileSync(join(folder, 'tally.jsonl'), 'utf8').trimEnd().split('\n');
  return lines.map((line) => JSON.parse(line) as TallyLine);
}

function isThere(path: string): boolean {
  return lstatSync(path, { throwIfNoEntry: false }) !== undefined;
}

/** @returns when `isSo` holds, looked at on every news of the folder. */
async function untilFolder(isSo: () => boolean): Promise<void> {
  const news = watch(folder);
  try {
    while (!isSo()) await once(news, 'change');
  } finally {
    news.close();
  }
}

/** Closes the port and opens it anew: the rig makes a new link for every opening. */
async function reopen(sender: Sender): Promise<Sender> {
  const path = join(folder, 'tty');
  const madeAt = () => lstatSync(path, { throwIfNoEntry: false, bigint: true })?.ctimeNs;
  const before = madeAt();
  const renewed = untilFolder(() => madeAt() !== undefined && madeAt() !== before);
  await sender.close();
  await renewed;
  return openRig();
}

async function openPort(path: string): Promise<Sender> {
  const sender = new Sender(path);
  await sender.open();
  undo.push(() => sender.close());
  return sender;
}

async function openRig(): Promise<Sender> {
  return openPort(join(folder, 'tty'));
}

const PREPARE = ['M302 P1', 'M211 S0', 'M84 S0', 'G90', 'M82', 'G28 Z', 'G1 Z-1 F1200', 'G92 Y70000 E0'];

async function cutPiece(sender: Sender, register: number): Promise<string> {
  await sender.runAll('G1 E64.5 F3000', 'G1 Z-4 F1200', 'M400');
  const [position] = await sender.run('M114');
  await sender.runAll(`G92 Y${register} E0`, 'G1 Z-1 F1200');
  return position ?? '';
}

describe('a virtual rig behind its pseudo-terminal', () => {
  it('cuts five pieces at speed 20, and its tally has each with its length', async () => {
    await startRig({ resetOnOpen: true });
    const sender = await openRig();
    expect(await sender.hear(/^start/)).toEqual(['start']);
    await sender.reset();
    expect((await sender.run('M115'))[0]).toContain('MACHINE_TYPE:Ellwand virtual rig');
    await sender.runAll(...PREPARE);
    for (let piece = 1; piece <= 5; piece += 1) {
      expect(await cutPiece(sender, 70_000 + piece)).toBe(
        `X:0.00 Y:${70_000 + piece - 1}.00 Z:-4.00 E:64.50 Count X:0 Y:0 Z:-400`,
      );
    }
    await sender.run('M400');
    const closings = readTally().filter((line) => line.kind === 'closing');
    expect(closings.map((closing) => closing.register)).toEqual([70_000, 70_001, 70_002, 70_003, 70_004]);
    for (const { wireMm, severed } of closings) {
      expect(severed).toBe(true);
      expect(Math.abs(wireMm - 64.5)).toBeLessThan(0.05);
    }
  });

  it('keeps register, feed and cut axis over a reopening when the port does not reset it', async () => {
    await startRig({ resetOnOpen: false });
    const first = await openRig();
    await first.reset();
    await first.runAll(...PREPARE, 'G92 Y70003 E0', 'G1 E20 F3000', 'M400');
    const second = await reopen(first);
    await second.reset();
    expect((await second.run('M114'))[0]).toBe('X:0.00 Y:70003.00 Z:-1.00 E:20.00 Count X:0 Y:0 Z:-100');
    expect(readTally().filter((line) => line.kind === 'reset')).toHaveLength(1);
  });

  it('finishes what it was sent before the port was closed', async () => {
    const rig = await startRig({ resetOnOpen: false });
    const first = await openRig();
    await first.reset();
    await first.runAll(...PREPARE, 'G1 E30 F3000', 'G1 Z-4 F1200');
    const second = await reopen(first);
    await second.reset();
    await second.run('M400');
    expect(rig.snapshot()).toMatchObject({ counts: { closings: 1, severed: 1 }, jawsShut: true });
  });

  it('forgets everything and says start when the port resets it', async () => {
    await startRig({ resetOnOpen: true });
    const first = await openRig();
    await first.hear(/^start/);
    await first.reset();
    await first.run('G92 Y70003');
    const second = await reopen(first);
    await second.hear(/^start/);
    await second.reset();
    expect((await second.run('M114'))[0]).toContain('Y:0.00');
    expect(readTally().filter((line) => line.kind === 'reset' && line.cause === 'port-opened')).toHaveLength(
      2,
    );
  });

  it('takes the port away with the cable, and comes back under another path', async () => {
    const rig = await startRig({ resetOnOpen: false });
    const first = await openRig();
    await first.reset();
    await first.run('G92 Y70003');
    await rig.control({ do: 'usb', plugged: false });
    expect(isThere(join(folder, 'tty'))).toBe(false);
    await rig.control({ do: 'usb', plugged: true, path: join(folder, 'other') });
    const second = await openPort(join(folder, 'other'));
    await second.reset();
    expect((await second.run('M114'))[0]).toContain('Y:70003.00');
  });

  it('answers its control socket line by line, and says what it did not understand', async () => {
    await startRig({ resetOnOpen: false });
    const socket = createConnection(join(folder, 'control'));
    undo.push(() => void socket.destroy());
    const requests = [
      '{"id":1,"do":"guard","open":true}',
      'nonsense',
      '{"id":2,"do":"guard"}',
      '{"id":3,"do":"snapshot"}',
    ];
    socket.write(`${requests.join('\n')}\n`);
    const answers: unknown[] = [];
    for await (const line of createInterface({ input: socket })) {
      answers.push(JSON.parse(line));
      if (answers.length === requests.length) break;
    }
    expect(answers).toMatchObject([
      { id: 1, ok: true },
      { ok: false, error: 'bad-json' },
      { id: 2, ok: false, error: 'bad-request' },
      { id: 3, ok: true, snapshot: { guardOpen: true, board: 'running' } },
    ]);
  });
});
