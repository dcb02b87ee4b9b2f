import { createHash, randomUUID } from 'node:crypto';
import { readFile, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { openProgramStore } from '@/agent/programs/store';
import { loadCachedRigs, saveCachedRigs } from '@/agent/uplink/rigs-cache';
import type { Profile } from '@/lib/program/profile';
import type { RunProgram } from '@/lib/protocol/pairing';
import { makeFolder, RIG } from './journal-support';

const profile: Profile = {
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

function runProgram(program = 'G92 Y420000 E0\nG1 E80\n'): RunProgram {
  return {
    runId: randomUUID(),
    rigId: RIG,
    fence: 1,
    tag: 42,
    pieces: 3,
    lengthMm: 80,
    firstPieces: 0,
    wireId: randomUUID(),
    profileVersion: 1,
    profile,
    programSha256: createHash('sha256').update(program).digest('hex'),
    program,
  };
}

describe('the programs on disk', () => {
  it('are there at the next start, until they are dropped', async () => {
    const dir = await makeFolder();
    const run = runProgram();
    await (await openProgramStore(dir)).saveProgram(run);
    const store = await openProgramStore(dir);
    expect(await store.loadProgram(run.runId)).toEqual(run);
    expect(await store.heldRunIds()).toEqual([run.runId]);
    await store.dropProgram(run.runId);
    await store.dropProgram(run.runId);
    expect(await store.loadProgram(run.runId)).toBeNull();
    expect(await store.heldRunIds()).toEqual([]);
  });

  it('are refused when the text is not the one its sum was made of', async () => {
    const store = await openProgramStore(await makeFolder());
    const run = { ...runProgram(), program: 'G1 E81\n' };
    await expect(store.saveProgram(run)).rejects.toMatchObject({ code: 'program-refused' });
    expect(await store.loadProgram(run.runId)).toBeNull();
  });

  it.each([
    ['one altered figure', (text: string) => text.replace('E80', 'E90')],
    ['half a file', (text: string) => text.slice(0, text.length / 2)],
  ])('are not given out after damage: %s', async (_what, alter) => {
    const dir = await makeFolder();
    const store = await openProgramStore(dir);
    const run = runProgram();
    await store.saveProgram(run);
    const path = join(dir, 'programs', `${run.runId}.json`);
    await writeFile(path, alter(await readFile(path, 'utf8')));
    await expect(store.loadProgram(run.runId)).rejects.toMatchObject({ code: 'program-not-held' });
  });

  it('never leave their folder, whatever the run is called', async () => {
    const store = await openProgramStore(await makeFolder());
    await expect(store.loadProgram('../token')).rejects.toThrow();
  });
});

describe('the rigs that an agent knows without its server', () => {
  const rigs = { rigs: [{ rigId: RIG, name: 'Rig 1', fence: 3, profileVersion: 2, profile }] };

  it('are there at the next start', async () => {
    const dir = await makeFolder();
    expect(await loadCachedRigs(dir)).toBeNull();
    await saveCachedRigs(dir, rigs);
    expect(await loadCachedRigs(dir)).toEqual(rigs);
  });

  it('are not given out when one figure of a profile was altered', async () => {
    const dir = await makeFolder();
    await saveCachedRigs(dir, rigs);
    const path = join(dir, 'rigs');
    await writeFile(path, (await readFile(path, 'utf8')).replace('"cutMm":8', '"cutMm":9'));
    expect(await loadCachedRigs(dir)).toBeNull();
  });
});
