import { afterEach, describe, expect, it } from 'vitest';
import { AgentBench } from '../support/agent-bench';

let bench: AgentBench | null = null;

afterEach(async () => {
  await bench?.close();
  bench = null;
});

describe('laws 1 and 7 at the rig: a run without any web', () => {
  it('counts exactly the 200 pieces that the jaws severed, each within 0.05 mm', async () => {
    bench = await AgentBench.open();
    bench.startAgent();
    const run = bench.makeRun({ pieces: 200, lengthMm: 114.02 });
    await bench.start(run);
    await bench.until(({ runner }) => runner === 'tray-full', 'the run ends', 110_000);
    await bench.told('run-ended', 1);

    const pieces = bench.closings().filter(({ wireMm }) => Math.abs(wireMm - 114.02) <= 0.05);
    expect(pieces).toHaveLength(200);
    expect(pieces.every(({ severed, guardOpen }) => severed && !guardOpen)).toBe(true);
    // One more closing: the trim.
    expect(bench.closings()).toHaveLength(201);
    expect(bench.desk.said('piece-cut').map(({ piece }) => piece)).toEqual(
      Array.from({ length: 200 }, (_, index) => index + 1),
    );
    expect(bench.desk.said('trim-cut')).toHaveLength(1);
    expect(bench.desk.said('run-ended')).toEqual([
      {
        kind: 'run-ended',
        rigId: run.rigId,
        runId: run.runId,
        outcome: 'complete',
        pieces: 200,
        personId: null,
      },
    ]);
    expect(
      bench.tally.filter(({ kind }) => kind === 'motion-guard-open' || kind === 'limit-exceeded'),
    ).toEqual([]);
  }, 120_000);
});
