import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { TallyLine } from '@/agent/virtual/tally';

/** Lengths of what a virtual rig of the demo has truly cut off, in mm, in order: its own truth, not what was reported. */
export function cutOffMm(dataDir: string, rig: string): number[] {
  const text = readFileSync(join(dataDir, 'demo', 'tally', `${rig}.jsonl`), 'utf8');
  // What follows the last line's end is still being written.
  const lines = text.split('\n').slice(0, -1);
  return lines
    .map((line) => JSON.parse(line) as TallyLine)
    .flatMap((line) => (line.kind === 'closing' && line.severed ? [line.wireMm] : []));
}
