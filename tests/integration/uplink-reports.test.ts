import { createHash, randomUUID } from 'node:crypto';
import { stat, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { loadIdentity, obtainIdentity } from '@/agent/uplink/pair';
import { reportSchema, type RigReport } from '@/lib/protocol/report';
import { makeFolder, makeWorld, openServer, RIG, testClock } from './uplink-support';
import { TOKEN } from './uplink-server';

const REPORT = '/api/agent/report';

function rig(piecesCut: number): RigReport {
  return {
    rigId: RIG,
    port: 'open',
    portProblem: null,
    firmware: null,
    signals: { guard: { reading: 'unknown' }, wire: { reading: 'unknown' }, heater: { reading: 'unknown' } },
    runner: 'cutting',
    runId: null,
    programSha256: null,
    piecesCut,
    holdReason: null,
    workHold: false,
    challenge: 'a-challenge-of-16',
    fence: 0,
    virtualDisplay: null,
  };
}

describe('reports', () => {
  it('tell the rigs, the journal and its backlog each second', async () => {
    const { server, journal, uplink, append } = await makeWorld({ clock: testClock({ speed: 10 }) });
    server.mishap = ({ path }) => (path === '/api/agent/events' ? { refuse: 'service-away' } : null);
    await append(1, 2, 3);
    uplink.report([rig(3)]);
    uplink.start();
    await server.until(() => server.to(REPORT).length >= 6);
    const report = reportSchema.parse(server.to(REPORT)[0]?.body);
    expect(report).toMatchObject({ journalId: journal.id, backlog: 3, rigs: [{ piecesCut: 3 }] });
    const times = server.to(REPORT).map(({ atMs }) => atMs);
    const meanMs = ((times[5] ?? Infinity) - (times[1] ?? 0)) / 4;
    // 1 s on the agent's clock, which runs 10 times as fast.
    expect(meanMs).toBeGreaterThan(80);
    expect(meanMs).toBeLessThan(300);
  });

  it('go up at once on a change, many changes together, the last one always', async () => {
    const { server, uplink } = await makeWorld();
    uplink.start();
    await server.until(() => server.to(REPORT).length === 1);
    const beginMs = performance.now();
    for (let pieces = 1; pieces <= 100; pieces += 1) uplink.report([rig(pieces)]);
    const last = () => reportSchema.parse(server.to(REPORT).at(-1)?.body).rigs[0]?.piecesCut;
    await server.until(() => last() === 100);
    expect(performance.now() - beginMs).toBeLessThan(500);
    expect(server.to(REPORT).length).toBeLessThan(5);
  });

  it.each([-90_000, 0, 90_000])('measure a clock that is %d ms ahead', async (aheadMs) => {
    const { server, uplink } = await makeWorld({ clock: testClock({ aheadMs }) });
    expect(uplink.clockSkewMs).toBe(0);
    uplink.start();
    for (let pieces = 1; pieces <= 4; pieces += 1) {
      uplink.report([rig(pieces)]);
      await server.until(() => server.to(REPORT).length > pieces);
    }
    expect(Math.abs(uplink.clockSkewMs + aheadMs)).toBeLessThan(50);
  });

  it('do not stand still when one is never answered', async () => {
    const { server, uplink } = await makeWorld({ clock: testClock({ speed: 20 }) });
    server.mishap = ({ path }) => (path === REPORT && server.to(REPORT).length < 2 ? 'cut-after' : null);
    uplink.start();
    await server.until(() => server.to(REPORT).length >= 4);
    expect(server.to(REPORT).length).toBeGreaterThanOrEqual(4);
  });
});

describe('questions to the server', () => {
  const runId = randomUUID();
  const program = 'G92 Y420000 E0\n';

  it('refuse a program whose text is not the one its sum was made of', async () => {
    const { server, uplink } = await makeWorld();
    const path = `/api/agent/runs/${runId}/program`;
    const run = { ...runOf(runId, program), program: `${program}G28\n` };
    server.answers.set(path, run);
    await expect(uplink.fetchProgram(runId)).rejects.toMatchObject({ code: 'program-refused' });
    server.answers.set(path, runOf(runId, program));
    expect(await uplink.fetchProgram(runId)).toEqual(runOf(runId, program));
  });

  it('are asked again when the server is away for a moment, and give its word otherwise', async () => {
    const { server, uplink } = await makeWorld({ clock: testClock({ speed: 20 }) });
    server.mishap = () => (server.heard.length < 2 ? 'cut-before' : null);
    server.answers.set('/api/agent/rigs', { rigs: [] });
    expect(await uplink.fetchRigs()).toEqual({ rigs: [] });
    await expect(uplink.fetchProgram(runId)).rejects.toMatchObject({ code: 'not-found' });
    await server.close();
    await expect(uplink.fetchRigs()).rejects.toMatchObject({ code: 'service-away' });
  });
});

function runOf(id: string, program: string) {
  const profile = {
    cutAxis: {
      axis: 'Z',
      homing: 'endstop',
      homeMm: 0,
      standbyMm: 2,
      cutMm: 8,
      parkMm: 10,
      lowestMm: 0,
      highestMm: 20,
      speedMmS: 20,
      accelerationMmS2: 100,
      stepsPerMm: 400,
    },
    feed: {
      feedPerMm: 1,
      speedMmS: 50,
      accelerationMmS2: 500,
      longestMoveMm: 150,
      shortestPieceMm: 10,
      longestPieceMm: 1000,
      trimMm: 20,
    },
    registerAxis: 'Y',
    steppersHoldS: 60,
    fitted: {
      guardSwitch: null,
      guardCutsMotorPower: false,
      hardwareStop: false,
      wireSwitch: false,
      display: false,
      beeper: false,
      heater: false,
      emergencyParser: false,
    },
    serial: { baudRate: 115200, resetsOnOpen: false },
  };
  return {
    runId: id,
    rigId: RIG,
    fence: 1,
    tag: 42,
    pieces: 3,
    lengthMm: 80,
    firstPieces: 0,
    wireId: '7b0a3a40-26a5-4c60-8a6c-8c3d9f2a7a11',
    profileVersion: 1,
    profile,
    programSha256: createHash('sha256').update(program).digest('hex'),
    program,
  };
}

describe('pairing', () => {
  async function given() {
    const server = await openServer();
    const agentId = randomUUID();
    server.mishap = ({ path }) =>
      path === '/api/agent/pair' ? { answer: { agentId, name: 'Bench', token: TOKEN } } : null;
    const options = {
      server: server.address,
      dataDir: await makeFolder(),
      pairingCode: 'ABCD-1234',
      software: 'ellwand-agent test',
      clock: testClock(),
      fetch,
      closing: new AbortController().signal,
    };
    return { server, options, agentId };
  }

  it('buys a token with the code once, keeps it readable for the agent’s user alone, and uses it again', async () => {
    const { server, options, agentId } = await given();
    expect(await obtainIdentity(options)).toMatchObject({ agentId, token: TOKEN });
    expect((await stat(join(options.dataDir, 'token.json'))).mode & 0o777).toBe(0o600);
    expect(await obtainIdentity(options)).toMatchObject({ agentId, token: TOKEN });
    expect(await obtainIdentity({ ...options, pairingCode: undefined })).toMatchObject({ token: TOKEN });
    expect(server.heard).toHaveLength(1);
    expect(server.heard[0]?.headers.authorization).toBeUndefined();
  });

  it('is done anew with another code', async () => {
    const { server, options } = await given();
    await obtainIdentity(options);
    await obtainIdentity({ ...options, pairingCode: 'WXYZ-9876' });
    expect(server.heard).toHaveLength(2);
  });

  it('never gives a token to another server than the one it is from', async () => {
    const { options } = await given();
    await obtainIdentity(options);
    const other = { ...options, server: 'http://127.0.0.1:9', pairingCode: undefined };
    await expect(obtainIdentity(other)).rejects.toMatchObject({ code: 'token-refused' });
  });

  it('gives the server’s refusal of a used code, and keeps nothing', async () => {
    const { server, options } = await given();
    server.mishap = () => ({ refuse: 'pairing-refused' });
    await expect(obtainIdentity(options)).rejects.toMatchObject({ code: 'pairing-refused' });
    expect(await loadIdentity(options.dataDir)).toBeNull();
  });

  it('mends a damaged token file, and without a code says that pairing is needed', async () => {
    const { options } = await given();
    await writeFile(join(options.dataDir, 'token.json'), '{"server":');
    const without = { ...options, pairingCode: undefined };
    await expect(obtainIdentity(without)).rejects.toMatchObject({ code: 'token-refused' });
    expect(await obtainIdentity(options)).toMatchObject({ token: TOKEN });
  });
});
