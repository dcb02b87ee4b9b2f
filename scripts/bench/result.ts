import { writeFileSync } from 'node:fs';
import { z } from 'zod';

/** What one bench has measured: one figure with its unit, and whatever explains it. */
export const benchResultSchema = z.object({
  name: z.string().regex(/^[a-z][a-z0-9-]*$/),
  /** The figure itself, in `unit`. */
  value: z.number(),
  unit: z.string().min(1),
  /** What the figure should be, in the same unit; null where none was set. */
  goal: z.number().nullable(),
  /** What it is compared with, in the same unit; null where there is nothing. */
  baseline: z.number().nullable(),
  /** value / baseline; null without a baseline. */
  ratio: z.number().nullable(),
  /** Percentiles, counts and settings that the figure was measured with. */
  details: z.record(z.string(), z.json()),
});

export type BenchResult = z.infer<typeof benchResultSchema>;

/**
 * Hands the result to the dispatcher that has started this bench. Throws a ZodError when it is no whole result, an Error
 * outside of `npm run bench`.
 */
export function reportResult(result: BenchResult): void {
  const file = process.env.ELLWAND_BENCH_OUT;
  if (!file) throw new Error('Run benches by `npm run bench`');
  writeFileSync(file, JSON.stringify(benchResultSchema.parse(result), null, 2));
}
