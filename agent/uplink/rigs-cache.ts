import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { decodeCheckedLine, encodeCheckedLine } from '@/agent/journal/checked-line';
import { fileErrorCode, writeDurably } from '@/agent/journal/durable-file';
import { boundRigsSchema, type BoundRigs } from '@/lib/protocol/pairing';

const pathIn = (dataDir: string) => join(dataDir, 'rigs');

/** Keeps the bound rigs with their profiles, so that the agent comes up without the server (law 7). */
export async function saveCachedRigs(dataDir: string, rigs: BoundRigs): Promise<void> {
  await writeDurably(pathIn(dataDir), encodeCheckedLine(rigs));
}

/** @returns null when none were kept, or not one byte for byte as it was written: nothing may move by a wrong number */
export async function loadCachedRigs(dataDir: string): Promise<BoundRigs | null> {
  try {
    const line = await readFile(pathIn(dataDir));
    const rigs = boundRigsSchema.safeParse(decodeCheckedLine(line.subarray(0, -1)));
    return rigs.success ? rigs.data : null;
  } catch (cause) {
    if (fileErrorCode(cause) === 'ENOENT') return null;
    throw cause;
  }
}
