import { closeSync, mkdirSync, openSync, writeSync } from 'node:fs';
import { dirname } from 'node:path';
import type { TallyLine } from '../tally';

/** An append-only file, one JSON line for each event, on disk before the rig goes on. */
export interface TallyFile {
  append: (line: TallyLine) => void;
  close: () => void;
}

/** Opens the file for appending, with its folder. */
export function openTally(path: string): TallyFile {
  mkdirSync(dirname(path), { recursive: true });
  const file = openSync(path, 'a');
  return {
    append: (line) => void writeSync(file, `${JSON.stringify(line)}\n`),
    close: () => closeSync(file),
  };
}
