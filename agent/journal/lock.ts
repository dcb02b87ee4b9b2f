import { randomUUID } from 'node:crypto';
import { link, open, readFile, rename, unlink } from 'node:fs/promises';
import { z } from 'zod';
import { fileErrorCode } from './durable-file';
import { JournalError } from './errors';

const ownerSchema = z.object({ pid: z.number().int().min(1), startedAt: z.string() });
type Owner = z.infer<typeof ownerSchema>;

export interface Lock {
  release(): Promise<void>;
}

/** How often a lock left by a dead process is taken over before giving up. */
const TAKEOVER_ROUNDS = 5;

/**
 * Takes the folder for this process alone. A lock whose process is dead is taken over.
 * @throws JournalError `journal-locked` while its owner lives
 */
export async function takeLock(path: string): Promise<Lock> {
  const mine = JSON.stringify({
    pid: process.pid,
    startedAt: await processStart(process.pid),
  } satisfies Owner);
  for (let round = 0; round < TAKEOVER_ROUNDS; round += 1) {
    if (await createWhole(path, mine)) return { release: () => releaseLock(path, mine) };
    await removeIfOwnerDead(path);
  }
  throw new JournalError('journal-locked', `the lock ${path} could not be taken over: remove it by hand`);
}

/** Creates the lock with its content in one step, so that nobody ever reads half an owner. */
async function createWhole(path: string, content: string): Promise<boolean> {
  const draft = `${path}.${randomUUID()}`;
  const handle = await open(draft, 'w');
  await handle.writeFile(content);
  await handle.close();
  try {
    await link(draft, path);
    return true;
  } catch (cause) {
    if (fileErrorCode(cause) === 'EEXIST') return false;
    throw cause;
  } finally {
    await unlink(draft);
  }
}

async function removeIfOwnerDead(path: string): Promise<void> {
  const content = await readIfThere(path);
  if (content === null) return;
  const owner = parseOwner(content);
  if (owner && (await lives(owner))) {
    throw new JournalError(
      'journal-locked',
      `process ${owner.pid} works in this folder already: stop it first, or use another dataDir`,
    );
  }
  const grave = `${path}.dead.${randomUUID()}`;
  await rename(path, grave).catch(ignoreMissing);
  const buried = await readIfThere(grave);
  // Somebody may have taken the lock between the look and the rename: give it back.
  if (buried !== null && buried !== content) await link(grave, path).catch(ignoreExisting);
  if (buried !== null) await unlink(grave);
}

async function releaseLock(path: string, mine: string): Promise<void> {
  if ((await readIfThere(path)) === mine) await unlink(path);
}

async function lives(owner: Owner): Promise<boolean> {
  try {
    process.kill(owner.pid, 0);
  } catch (cause) {
    if (fileErrorCode(cause) !== 'EPERM') return false;
  }
  return (await processStart(owner.pid)) === owner.startedAt;
}

/** When a process began, in the kernel's ticks: tells a process from a later one with the same number. */
async function processStart(id: number): Promise<string> {
  const stat = await readIfThere(`/proc/${id}/stat`);
  if (stat === null) return 'unknown';
  // The name in parentheses may hold blanks; field 22 of proc(5) is the 20th after it.
  return stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19] ?? 'unknown';
}

function parseOwner(content: string): Owner | null {
  try {
    return ownerSchema.parse(JSON.parse(content));
  } catch {
    return null;
  }
}

async function readIfThere(path: string): Promise<string | null> {
  try {
    return await readFile(path, 'utf8');
  } catch (cause) {
    const code = fileErrorCode(cause);
    if (code === 'ENOENT' || code === 'ESRCH') return null;
    throw cause;
  }
}

function ignoreMissing(cause: unknown): void {
  if (fileErrorCode(cause) !== 'ENOENT') throw cause;
}

function ignoreExisting(cause: unknown): void {
  if (fileErrorCode(cause) !== 'EEXIST') throw cause;
}
