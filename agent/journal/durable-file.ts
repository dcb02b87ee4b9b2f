import { constants } from 'node:fs';
import { open, rename, unlink } from 'node:fs/promises';
import { dirname } from 'node:path';
import { z } from 'zod';

const failure = z.object({ code: z.string() });

/**
 * The operating system's code of a failed file operation, as `ENOENT`.
 * @returns null when the value is no such failure
 */
export function fileErrorCode(cause: unknown): string | null {
  const parsed = failure.safeParse(cause);
  return parsed.success ? parsed.data.code : null;
}

/** Makes the names in a folder (new, renamed, removed files) outlast a power loss. */
export async function syncFolder(folder: string): Promise<void> {
  const handle = await open(folder, constants.O_RDONLY);
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

/**
 * Puts `content` at `path` so that after any crash either the old or the whole new file is there. Resolves once
 * it would outlast a power loss. Two writers of the same path must take turns.
 */
export async function writeDurably(path: string, content: string | Buffer, mode = 0o644): Promise<void> {
  const draft = `${path}.draft`;
  const handle = await open(draft, 'w', mode);
  try {
    await handle.chmod(mode);
    await handle.writeFile(content);
    await handle.sync();
  } finally {
    await handle.close();
  }
  await rename(draft, path);
  await syncFolder(dirname(path));
}

/** Removes a file for good; one that is not there is no error. */
export async function removeDurably(path: string): Promise<void> {
  try {
    await unlink(path);
  } catch (cause) {
    if (fileErrorCode(cause) === 'ENOENT') return;
    throw cause;
  }
  await syncFolder(dirname(path));
}
