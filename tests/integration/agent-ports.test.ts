import { createHash, randomUUID } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, it } from 'vitest';
import { runAgent } from '@/agent/assemble';
import { scaledClock } from '@/agent/clock';
import type { PortSeen } from '@/agent/link/ports';
import { openSerialPort } from '@/agent/link/serial-port';
import type { LogEntry } from '@/agent/log';
import { createVirtualRig, type VirtualRig } from '@/agent/virtual/rig';
import type { TallyLine } from '@/agent/virtual/tally';
import { generateProgram } from '@/lib/program/generate';
import type { Profile } from '@/lib/program/profile';
import type { RunProgram } from '@/lib/protocol/pairing';
import type { RigReport } from '@/lib/protocol/report';
import { benchProfile, PERSON, WIRE } from '../support/agent-bench';
import { DESK_PAIRING_CODE, openFakeDesk, type FakeDesk } from '../support/fake-desk';

const LENGTH_MM = 100;
const PIECES = 6;
const profile: Profile = { ...benchProfile, fitted: { ...benchProfile.fitted, display: false } };

/** One virtual rig, the run on it, and the socket that its cable is in. */
interface Bay {
  name: string;
  rigId: string;
  rig: VirtualRig;
  tally: TallyLine[];
  run: RunProgram;
}

let folder: string;
let desk: FakeDesk;
let bays: Bay[];
let ports: PortSeen[];
let log: LogEntry[];
let closing: AbortController;
let agent: Promise<void>;

function makeRun(rigId: string, tag: number): RunProgram {
  const program = generateProgram(profile, { tag, pieces: PIECES, lengthMm: LENGTH_MM }).text;
  const programSha256 = createHash('sha256').update(program).digest('hex');
  const order = { tag, pieces: PIECES, lengthMm: LENGTH_MM, firstPieces: 0, wireId: WIRE };
  return {
    runId: randomUUID(),
    rigId,
    fence: 0,
    ...order,
    profileVersion: 1,
    profile,
    programSha256,
    program,
  };
}

async function makeBay(name: string, tag: number): Promise<Bay> {
  const tally: TallyLine[] = [];
  const rig = createVirtualRig({
    tty: join(folder, name),
    speed: 20,
    resetOnOpen: false,
    onTally: (line) => tally.push(line),
  });
  await rig.start();
  const rigId = randomUUID();
  return { name, rigId, rig, tally, run: makeRun(rigId, tag) };
}

/** A board like every other, told apart by its socket alone. */
const clone = (usbPath: string, path: string): PortSeen => ({
  path: join(folder, path),
  vendorId: '1a86',
  productId: '7523',
  serialNumber: null,
  usbPath,
});

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'agent-ports-'));
  desk = await openFakeDesk();
  bays = [await makeBay('curlew', 17), await makeBay('dunlin', 18)];
  for (const { run } of bays) desk.programs.set(run.runId, run);
  desk.rigs = bays.map(({ rigId, name }) => ({ rigId, name, fence: 0, profileVersion: 1, profile }));
  ports = [clone('1-1.1', 'curlew'), clone('1-1.2', 'dunlin')];
  log = [];
  closing = new AbortController();
  const identity = { vendorId: '1a86', productId: '7523' };
  const config = {
    server: desk.url,
    dataDir: join(folder, 'data'),
    pairingCode: DESK_PAIRING_CODE,
    allowUnencrypted: false,
    clockSpeed: 4,
    log: { format: 'json', level: 'info' } as const,
    rigs: [
      { rig: 'curlew', port: { ...identity, usbPath: '1-1.1' } },
      { rig: 'dunlin', port: { ...identity, usbPath: '1-1.2' } },
    ],
  };
  const edges = {
    clock: scaledClock(config.clockSpeed),
    random: () => 0,
    randomId: randomUUID,
    randomChallenge: () => randomUUID(),
    randomCode: () => '0000',
    openPort: openSerialPort,
    listPorts: () => Promise.resolve(ports),
    fetch,
    log: (entry: LogEntry) => log.push(entry),
  };
  agent = runAgent(config, edges, closing);
});

afterEach(async () => {
  closing.abort();
  await agent;
  for (const { rig } of bays) await rig.stop();
  await desk.close();
  rmSync(folder, { recursive: true, force: true });
});

const until = ({ rigId, name }: Bay, happened: (report: RigReport) => boolean, what: string) =>
  desk.until(() => {
    const report = desk.report(rigId);
    return report && happened(report) ? report : null;
  }, `${name}: ${what}`);

const ready = (bay: Bay) =>
  until(
    bay,
    ({ port, signals }) =>
      port === 'open' && Object.values(signals).every(({ reading }) => reading !== 'unknown'),
    'is read',
  );

function envelope({ rigId }: Bay) {
  return { id: randomUUID(), rigId, personId: PERSON, fence: 0, issuedAt: new Date().toISOString() };
}

async function move(bay: Bay, order: { kind: 'start-run' } | { kind: 'go-on' }) {
  const { challenge } = await ready(bay);
  const { runId, programSha256 } = bay.run;
  const conditions = {
    notesVersion: 1,
    acknowledgedBy: PERSON,
    acknowledgedAt: new Date().toISOString(),
    trayCleared: true,
    workHold: false,
    loadedWireId: WIRE,
    spoolLeftMm: 100_000,
  };
  const common = { ...envelope(bay), challenge, presenceCode: null, conditions, runId };
  return desk.give(
    order.kind === 'start-run'
      ? { ...common, kind: 'start-run', programSha256 }
      : { ...common, kind: 'go-on', firstPiecesAgain: false },
  );
}

/** Pulls both cables and puts each rig's into the socket that is named, under a new name of its port. */
async function replug(sockets: readonly [string, string], names: readonly [string, string]): Promise<void> {
  for (const { rig } of bays) await rig.control({ do: 'usb', plugged: false });
  ports = [];
  for (const bay of bays) await until(bay, ({ port }) => port !== 'open', 'is lost');
  for (const [index, { rig }] of bays.entries()) {
    await rig.control({ do: 'usb', plugged: true, path: join(folder, names[index] ?? '') });
  }
  ports = bays.map((_, index) => clone(sockets[index] ?? '', names[index] ?? ''));
}

const closings = ({ tally }: Bay) => tally.flatMap((line) => (line.kind === 'closing' ? [line] : []));
const counted = ({ rigId }: Bay) =>
  desk.said('piece-cut').flatMap((event) => (event.rigId === rigId ? [event.piece] : []));

it('two rigs whose cables are swapped in mid-run get nothing of each other’s, and go on rightly when put back', async () => {
  for (const bay of bays) {
    await ready(bay);
    await desk.give({ kind: 'take-program', ...envelope(bay), runId: bay.run.runId });
    expect(await move(bay, { kind: 'start-run' })).toMatchObject({ outcome: 'done' });
  }
  for (const bay of bays) await desk.until(() => counted(bay).length >= 2, `${bay.name}: two pieces`);

  await replug(['1-1.2', '1-1.1'], ['one', 'two']);
  for (const bay of bays) {
    await until(bay, ({ holdReason }) => holdReason === 'register-foreign', 'is held as not this run');
  }
  const before = bays.map(({ rig }) => rig.snapshot().motionMs);
  for (const bay of bays) expect(await move(bay, { kind: 'go-on' })).toMatchObject({ outcome: 'refused' });
  expect(bays.map(({ rig }) => rig.snapshot().motionMs)).toEqual(before);
  expect(desk.said('piece-doubted')).toEqual([]);

  await replug(['1-1.1', '1-1.2'], ['three', 'four']);
  for (const bay of bays) {
    await until(bay, ({ holdReason }) => holdReason === 'link-lost', 'is known again');
    expect(await move(bay, { kind: 'go-on' })).toMatchObject({ outcome: 'done' });
  }
  for (const bay of bays) {
    await until(bay, ({ runner }) => runner === 'tray-full', 'has ended');
    await desk.until(() => counted(bay).length >= PIECES, `${bay.name}: all pieces`);
    expect(counted(bay)).toEqual([1, 2, 3, 4, 5, 6]);
    const good = closings(bay).filter(
      ({ wireMm, severed }) => severed && Math.abs(wireMm - LENGTH_MM) <= 0.05,
    );
    expect(good).toHaveLength(PIECES);
  }
  expect(log.some(({ rig, code }) => rig === 'curlew' && code === 'run-held')).toBe(true);
});

it('a port that two boards could be is refused with what to do, until one of them is gone', async () => {
  const [curlew] = bays;
  if (!curlew) throw new Error('no bay');
  await ready(curlew);
  await curlew.rig.control({ do: 'usb', plugged: false });
  ports = [clone('1-1.1', 'one'), clone('1-1.1', 'two')];
  const { portProblem } = await until(curlew, ({ port }) => port === 'refused', 'is refused');
  expect(portProblem).toMatch(/^Add "usbPath" .* in the configuration: both .*one and .*two/);
  await curlew.rig.control({ do: 'usb', plugged: true, path: join(folder, 'one') });
  ports = [clone('1-1.1', 'one')];
  await ready(curlew);
  expect(log.filter(({ code }) => code === 'port-refused').map(({ rig }) => rig)).toEqual(['curlew']);
});
