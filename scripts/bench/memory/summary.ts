import { mean, quantile, rounded, slopeOf } from '../figures';
import type { BenchResult } from '../result';

const GOAL_MB = 90;
const SAMPLES_LEAST = 6;

/** What one process of the house (with its own children) held at one moment; `atMs` since 1970. */
export interface Sample {
  atMs: number;
  rssMb: number;
  processes: number;
}

/** Figures of one process; `growthMbPerMinute` over the last half of the samples, with its standard error. */
function describe(samples: readonly Sample[]) {
  const lastHalf = samples.slice(Math.floor(samples.length / 2));
  const line = slopeOf(lastHalf.map(({ atMs, rssMb }) => ({ x: atMs / 60_000, y: rssMb })));
  const rss = samples.map(({ rssMb }) => rssMb);
  return {
    mostMb: rounded(Math.max(...rss)),
    medianMb: rounded(quantile(rss, 0.5)),
    firstMb: rounded(rss[0] ?? Number.NaN),
    lastMb: rounded(rss.at(-1) ?? Number.NaN),
    growthMbPerMinute: rounded(line.slope),
    growthStandardError: rounded(line.standardError),
    processes: Math.max(...samples.map(({ processes }) => processes)),
  };
}

/** The figures of all processes by name; the value is the most that any agent held. @throws Error without agents */
export function summarise(
  samples: ReadonlyMap<string, readonly Sample[]>,
  emptyMb: readonly number[],
  settings: Record<string, number>,
): BenchResult {
  const short = [...samples].filter(([, own]) => own.length < SAMPLES_LEAST).map(([name]) => name);
  if (short.length > 0) throw new Error(`Too few samples of ${short.join(', ')}`);
  const described = [...samples].map(([name, own]) => ({ name, ...describe(own) }));
  const agents = described.filter(({ name }) => name.startsWith('agent '));
  if (agents.length === 0) throw new Error('No agent was running');
  const value = Math.max(...agents.map(({ mostMb }) => mostMb));
  const baseline = rounded(mean(emptyMb));
  return {
    name: 'memory',
    value,
    unit: 'MB, most of any agent',
    goal: GOAL_MB,
    baseline,
    ratio: value / baseline,
    details: {
      measured:
        'resident memory of each process with its children; shared pages count in each, also of PostgreSQL',
      baselineIs: 'an empty Node.js process of the same version, MB',
      agentGrowthMbPerMinute: Math.max(...agents.map(({ growthMbPerMinute }) => growthMbPerMinute)),
      processes: described,
      ...settings,
    },
  };
}
