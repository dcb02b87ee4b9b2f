/** `memory [--minutes N]`: what each process of the house holds while all eight rigs of the demo are cutting. */
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as pause } from 'node:timers/promises';
import { z } from 'zod';
import { openBusyFloor, type BusyFloor } from './floor/floor';
import { LENGTH_MM } from './floor/queue-work';
import { readRigSpeed } from './floor/rig-speed';
import { familyOf, readProcesses } from './memory/processes';
import { summarise, type Sample } from './memory/summary';
import { readMinutes } from './minutes';
import { reportResult } from './result';

const DEFAULT_MINUTES = 10;
/** Start, first pieces and trays take time of their own. */
const EXTRA_MINUTES = 3;
const SAMPLE_EVERY_MS = 5_000;

const runningSchema = z.array(z.object({ name: z.string(), identity: z.object({ pid: z.number() }) }));

interface Member {
  name: string;
  pid: number;
}

/** What the house's start has noted as running. */
function membersOf(dataDir: string): Member[] {
  const text = readFileSync(join(dataDir, 'running.json'), 'utf8');
  return runningSchema.parse(JSON.parse(text)).map(({ name, identity }) => ({ name, pid: identity.pid }));
}

function sampleAll(members: readonly Member[], samples: Map<string, Sample[]>): void {
  const processes = readProcesses();
  const atMs = Date.now();
  for (const { name, pid } of members) {
    const family = familyOf(pid, processes);
    // A process that died and came back is no measurement of its growth.
    if (family.length === 0) throw new Error(`${name} has ended`);
    const rssMb = family.reduce((sum, one) => sum + one.rssMb, 0);
    samples.set(name, [...(samples.get(name) ?? []), { atMs, rssMb, processes: family.length }]);
  }
}

async function sampleUntil(untilMs: number, floor: BusyFloor, emptyPid: number) {
  const members = membersOf(floor.dataDir);
  const samples = new Map<string, Sample[]>();
  const emptyMb: number[] = [];
  while (Date.now() < untilMs) {
    sampleAll(members, samples);
    emptyMb.push(...familyOf(emptyPid, readProcesses()).map(({ rssMb }) => rssMb));
    await Promise.race([pause(SAMPLE_EVERY_MS), floor.failed]);
  }
  return { samples, emptyMb };
}

async function measure(minutes: number): Promise<void> {
  const cut = new Map<string, number>();
  const floor = await openBusyFloor(minutes + EXTRA_MINUTES, (message) => {
    if (message.kind === 'rig' && message.rig.run) cut.set(message.rig.run.id, message.rig.run.cut);
  });
  const empty = spawn(process.execPath, ['-e', 'setInterval(() => {}, 60_000)'], { stdio: 'ignore' });
  try {
    await once(empty, 'spawn');
    const before = sumOf(cut);
    console.log(`All rigs are cutting; measuring for ${minutes} min`);
    const untilMs = Date.now() + minutes * 60_000;
    const { samples, emptyMb } = await sampleUntil(untilMs, floor, empty.pid ?? 0);
    const work = { pieces: sumOf(cut) - before, lengthMm: LENGTH_MM };
    const settings = { minutes, rigs: floor.rigs.length, rigSpeed: readRigSpeed(floor.dataDir), ...work };
    reportResult(summarise(samples, emptyMb, settings));
  } finally {
    const gone = once(empty, 'exit');
    empty.kill('SIGKILL');
    await gone;
    await floor.close();
  }
}

function sumOf(cut: ReadonlyMap<string, number>): number {
  return [...cut.values()].reduce((sum, pieces) => sum + pieces, 0);
}

await measure(readMinutes(DEFAULT_MINUTES));
process.exit();
