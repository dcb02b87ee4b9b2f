import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { z } from 'zod';

const benchFileSchema = z.object({ rigs: z.array(z.object({ speed: z.number() })).min(1) });

/** How much faster than a real one the slowest of the demo's virtual rigs is. */
export function readRigSpeed(dataDir: string): number {
  const text = readFileSync(join(dataDir, 'demo', 'rigs.json'), 'utf8');
  return Math.min(...benchFileSchema.parse(JSON.parse(text)).rigs.map(({ speed }) => speed));
}
