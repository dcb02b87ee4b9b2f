/**
 * `agent-time [--minutes N]`: what the agent itself adds to each piece, against a virtual rig as fast as a real one
 * behind a pseudo-terminal, with its journal on disk and a desk that stands in for the web.
 */
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { pieceDurationS } from '@/lib/program/duration';
import { AgentBench } from '@/tests/support/agent-bench';
import { addedPerPiece, type Passed } from './agent-time/added-time';
import { cutRun, type TimedRun } from './agent-time/cut-run';
import { timeSyncs } from './agent-time/disk';
import { summarise } from './agent-time/summary';
import { readMinutes } from './minutes';
import { reportResult } from './result';

const LENGTHS_MM = [25, 114];
const DEFAULT_MINUTES = 3;
const PIECES_LEAST = 10;
const RIG_SPEED = 1;
/** As `npm run agent` starts it. */
const LEAN = ['--max-semi-space-size=1', '--optimize-for-size'];

function startTimedAgent(bench: AgentBench, trafficFile: string): void {
  const entry = 'scripts/bench/agent-time/timed-agent.ts';
  const files = ['--config', bench.configPath, '--traffic', trafficFile];
  bench.agent = spawn(process.execPath, [...LEAN, 'scripts/run.mjs', entry, '--', ...files], {
    stdio: ['ignore', 'ignore', 'inherit'],
  });
}

/** Ends the agent and reads what it has noted. */
async function readTraffic({ agent }: AgentBench, trafficFile: string): Promise<Passed[]> {
  if (!agent || agent.exitCode !== null) throw new Error('The agent has ended before the measurement');
  const gone = once(agent, 'exit');
  agent.kill('SIGTERM');
  await gone;
  return JSON.parse(readFileSync(trafficFile, 'utf8')) as Passed[];
}

async function measure(bench: AgentBench, minutes: number): Promise<void> {
  const trafficFile = join(bench.folder, 'traffic.json');
  startTimedAgent(bench, trafficFile);
  const runs: TimedRun[] = [];
  for (const [index, lengthMm] of LENGTHS_MM.entries()) {
    const pieceMs = pieceDurationS(bench.profile, lengthMm) * 1000;
    const pieces = Math.max(PIECES_LEAST, Math.round((minutes * 60_000) / LENGTHS_MM.length / pieceMs));
    console.log(`${pieces} pieces of ${lengthMm} mm`);
    runs.push(await cutRun(bench, { lengthMm, pieces, tag: index + 1 }, pieces * pieceMs));
  }
  const result = summarise(runs, addedPerPiece(await readTraffic(bench, trafficFile)));
  const disk = await timeSyncs(bench.folder);
  const settings = { rigs: 1, rigSpeed: RIG_SPEED, profile: bench.profile };
  reportResult({ ...result, details: { ...result.details, disk, ...settings } });
}

const minutes = readMinutes(DEFAULT_MINUTES);
const bench = await AgentBench.open({ rig: { speed: RIG_SPEED } });
try {
  await measure(bench, minutes);
} finally {
  await bench.close();
}
