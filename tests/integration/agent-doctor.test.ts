import { execFile } from 'node:child_process';
import { readFile, readdir, rm, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import type { Findings } from '@/agent/doctor/findings';
import { AgentBench } from '../support/agent-bench';

const run = promisify(execFile);
const repo = fileURLToPath(new URL('../..', import.meta.url));

let bench: AgentBench;
beforeEach(async () => {
  bench = await AgentBench.open();
});
afterEach(() => bench.close());

async function doctor(): Promise<{ findings: Findings; code: number }> {
  const entry = ['scripts/run.mjs', 'agent/main.ts', '--', 'doctor', '--json', '--config', bench.configPath];
  const { stdout, code } = await run(process.execPath, entry, { cwd: repo }).then(
    (done) => ({ ...done, code: 0 }),
    (failed: { stdout: string; code: number }) => failed,
  );
  const findings: Findings = JSON.parse(stdout);
  return { findings, code };
}

const codesOf = ({ problems }: Findings) => problems.map(({ code }) => code).sort();

describe('the doctor', () => {
  it('asks a running agent in mid-run, opens none of its ports, and finds it well', async () => {
    bench.startAgent();
    const order = bench.makeRun({ pieces: 200, lengthMm: 400 });
    await bench.start(order);
    await bench.told('piece-cut', 1);
    const { findings, code } = await doctor();
    expect(findings).toMatchObject({
      agentRuns: true,
      rigs: [{ rig: 'bench rig', firmware: { virtual: true }, runner: expect.any(String) as string }],
      server: { reachable: true, tokenAccepted: true },
      journal: { damaged: false },
      problems: [],
    });
    expect(code).toBe(0);
    expect(bench.desk.said('run-held')).toEqual([]);
    expect(bench.desk.said('rig-lost')).toEqual([]);

    await bench.kill();
    const alone = await doctor();
    expect(codesOf(alone.findings)).toEqual(['run-under-way']);
    expect(alone.findings.agentRuns).toBe(false);
    expect(alone.findings.journal?.unacknowledged).toBeGreaterThanOrEqual(0);
    expect(alone.code).toBe(1);
  });

  it('without an agent asks the firmware itself, moves nothing, and says what to do about each thing', async () => {
    bench.startAgent();
    await bench.ready();
    await bench.kill();
    await bench.rig.control({ do: 'guard', open: true });
    await bench.rig.control({ do: 'heater', warmsToC: 90 });
    await bench.desk.shut();
    const { findings, code } = await doctor();
    expect(codesOf(findings)).toEqual(['guard-open', 'heater-warm', 'server-away']);
    expect(findings.problems.every(({ says, toDo }) => says !== '' && toDo !== '')).toBe(true);
    expect(findings.rigs[0]?.signals).toMatchObject({
      guard: { reading: 'open' },
      wire: { reading: 'present' },
    });
    expect(code).toBe(1);
    expect(bench.rig.snapshot().motionMs).toBe(0);
  });

  it('tells a damaged journal and a token that is refused, and mends neither', async () => {
    bench.startAgent();
    await bench.ready();
    await bench.kill();
    const journals = join(bench.folder, 'data/journal');
    const [generation = ''] = (await readdir(journals)).filter((name) => name.startsWith('journal-'));
    const [segment = ''] = await readdir(join(journals, generation)).then((names) =>
      names.filter((name) => name.startsWith('segment-')),
    );
    const path = join(journals, generation, segment);
    const bytes = await readFile(path);
    bytes[Math.floor(bytes.length / 2)] = 0;
    await writeFile(path, bytes);
    const token = join(bench.folder, 'data/token.json');
    await writeFile(token, (await readFile(token, 'utf8')).replace('fake-desk-token', 'some-other-word'));
    const { findings } = await doctor();
    expect(codesOf(findings)).toContain('journal-damaged');
    expect(codesOf(findings)).toContain('token-refused');
    expect(findings.journal?.damaged).toBe(true);
    expect(await readFile(path)).toEqual(bytes);
    expect(await readdir(journals)).not.toContain('lock');
    await rm(token);
    expect(codesOf((await doctor()).findings)).toContain('not-paired');
  });
});
