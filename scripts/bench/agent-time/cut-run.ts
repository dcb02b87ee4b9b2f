import type { AgentBench } from '@/tests/support/agent-bench';

/** Homing, trim and the waits of the start, on top of the cutting itself. */
const MARGIN_MS = 60_000;
/** A computer that is this much slower than the motion cannot measure. */
const SLOWEST = 3;

export interface TimedRun {
  lengthMm: number;
  pieces: number;
  /** From one closing of the jaws to the next, ms on the clock and ms of motion. */
  wholeMs: number[];
  idealMs: number[];
}

type Closing = ReturnType<AgentBench['closings']>[number];

function differences(closings: readonly Closing[], of: (closing: Closing) => number): number[] {
  return closings.slice(1).map((closing, index) => {
    const before = closings[index];
    return before ? of(closing) - of(before) : Number.NaN;
  });
}

/** One run from its start to the cleared tray. @throws Error when it does not end in time */
export async function cutRun(
  bench: AgentBench,
  { lengthMm, pieces, tag }: { lengthMm: number; pieces: number; tag: number },
  expectedMs: number,
): Promise<TimedRun> {
  const earlier = bench.closings().length;
  const run = bench.makeRun({ pieces, lengthMm, tag });
  await bench.start(run);
  const timeoutMs = SLOWEST * expectedMs + MARGIN_MS;
  await bench.until(({ runner }) => runner === 'tray-full', `${pieces} pieces are cut`, timeoutMs);
  await bench.desk.give({ kind: 'clear-tray', ...bench.envelope(), runId: run.runId });
  await bench.until(({ runner }) => runner === 'idle', 'the tray is cleared');
  // From the trim's closing, the first of the run, to the last piece's.
  const closings = bench.closings().slice(earlier);
  return {
    lengthMm,
    pieces,
    wholeMs: differences(closings, ({ atMs }) => atMs),
    idealMs: differences(closings, ({ motionMs }) => motionMs),
  };
}
