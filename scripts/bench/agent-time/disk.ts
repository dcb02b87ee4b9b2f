import { open } from 'node:fs/promises';
import { join } from 'node:path';
import { quantile, rounded } from '../figures';

const WRITES = 200;
const BYTES = 300;

/** How long this disk takes to keep one line of a journal, ms: `fdatasync` after each append, in `folder`. */
export async function timeSyncs(folder: string): Promise<{ syncMsP50: number; syncMsP95: number }> {
  const file = await open(join(folder, 'syncs'), 'w');
  const line = Buffer.alloc(BYTES, 'x');
  const tookMs: number[] = [];
  try {
    for (let write = 0; write < WRITES; write += 1) {
      const fromMs = performance.now();
      await file.write(line);
      await file.datasync();
      tookMs.push(performance.now() - fromMs);
    }
  } finally {
    await file.close();
  }
  return { syncMsP50: rounded(quantile(tookMs, 0.5)), syncMsP95: rounded(quantile(tookMs, 0.95)) };
}
