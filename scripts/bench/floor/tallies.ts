import { readFileSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import type { TallyLine } from '@/agent/virtual/tally';

export type Closing = Extract<TallyLine, { kind: 'closing' }>;

/** Every closing of the jaws of each virtual rig of the demo, by the rig's name, in order. */
export function readClosings(dataDir: string): Map<string, Closing[]> {
  const folder = join(dataDir, 'demo', 'tally');
  const files = readdirSync(folder).filter((file) => file.endsWith('.jsonl'));
  return new Map(
    files.map((file) => {
      // What follows the last line's end is still being written.
      const whole = readFileSync(join(folder, file), 'utf8').split('\n').slice(0, -1);
      const lines = whole.map((line) => JSON.parse(line) as TallyLine);
      return [file.slice(0, -'.jsonl'.length), lines.filter((line) => line.kind === 'closing')];
    }),
  );
}
