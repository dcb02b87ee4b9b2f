import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { AgentBench } from '../support/agent-bench';

const repo = fileURLToPath(new URL('../..', import.meta.url));

let bench: AgentBench;

beforeEach(async () => {
  bench = await AgentBench.open();
  bench.startAgent();
});

afterEach(() => bench.close());

async function agentStop(...args: string[]): Promise<{ code: number; said: string }> {
  const child = spawn(
    process.execPath,
    ['scripts/run.mjs', 'agent/main.ts', '--', 'stop', ...args, '--config', bench.configPath],
    { cwd: repo, stdio: ['ignore', 'pipe', 'pipe'] },
  );
  let said = '';
  for (const stream of [child.stdout, child.stderr]) {
    stream.setEncoding('utf8').on('data', (text: string) => (said += text));
  }
  const [code] = (await once(child, 'close')) as [number];
  return { code, said };
}

function pieces(count: number): Promise<unknown> {
  return new Promise((resolve) => {
    bench.onTally = () => bench.closings().length > count && resolve(undefined);
  });
}

describe('law 8 at the rig: stopping', () => {
  it('works at the rig’s computer while the server is away, and moves no axis afterwards', async () => {
    const run = bench.makeRun({ pieces: 500, lengthMm: 40 });
    await bench.start(run);
    await pieces(3);
    await bench.desk.shut();
    expect(await agentStop('bench rig')).toMatchObject({ code: 0 });
    const atAnswer = bench.closings().length;
    await bench.desk.open();
    const report = await bench.until(({ runner }) => runner === 'tray-full', 'the run has ended');
    await bench.told('run-ended', 1);
    expect(bench.desk.said('run-ended')[0]).toMatchObject({ outcome: 'stopped', personId: null });
    // The piece in the planner ends by itself; it is counted, and nothing parks.
    expect(bench.closings().length - atAnswer).toBeLessThanOrEqual(1);
    expect(report.piecesCut).toBe(bench.closings().length - 1);
    expect(bench.rig.snapshot().commandedMm.Z).not.toBe(12);
    const { motionMs } = bench.rig.snapshot();
    await bench.desk.until(() => bench.report().signals.guard, 'another report');
    expect(bench.rig.snapshot().motionMs).toBe(motionMs);
  });

  it('says so when no agent or no such rig is there', async () => {
    await bench.ready();
    expect((await agentStop('another rig')).code).toBe(1);
    expect((await agentStop('--all')).code).toBe(0);
    await bench.kill();
    const { code, said } = await agentStop('--all');
    expect(code).toBe(1);
    expect(said).toContain('No agent answers here');
  });

  it('by the server ends the run with the piece that was under way', async () => {
    const run = bench.makeRun({ pieces: 500, lengthMm: 40 });
    await bench.start(run);
    await pieces(3);
    const answer = await bench.desk.give({ kind: 'stop', ...bench.envelope(), runId: run.runId });
    expect(answer.outcome).toBe('done');
    await bench.told('run-ended', 1);
    expect(bench.desk.said('run-ended')[0]?.pieces).toBe(bench.closings().length - 1);
  });

  it('of the agent itself by SIGTERM leaves the run where it stands', async () => {
    const run = bench.makeRun({ pieces: 60, lengthMm: 40 });
    await bench.start(run);
    await pieces(3);
    const gone = bench.agent && once(bench.agent, 'exit');
    bench.agent?.kill('SIGTERM');
    await gone;
    bench.startAgent();
    const held = await bench.until(
      ({ runner, port }) => runner === 'held' && port === 'open',
      'the run is held',
    );
    expect(held.holdReason).toBe('agent-restarted');
    await bench.goOn(run);
    await bench.until(({ runner }) => runner === 'tray-full', 'the run ends');
    expect(bench.closings()).toHaveLength(61);
  });
});
