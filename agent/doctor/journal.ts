import { stat } from 'node:fs/promises';
import { join } from 'node:path';
import type { AgentConfig } from '@/agent/config';
import { JournalError } from '@/agent/journal/errors';
import { fileErrorCode } from '@/agent/journal/durable-file';
import { readGeneration, type Generation } from '@/agent/journal/generation';
import { BOUND_BYTES } from '@/agent/journal/journal';
import { takeLock, type Lock } from '@/agent/journal/lock';
import { listGenerations, listSegments } from '@/agent/journal/segment-files';
import { remember } from '@/agent/runner/remember';
import { isSnapshot, journalNoteSchema, type JournalNote } from '@/agent/runner/notes';
import type { JournalFinding, Problem } from './findings';

interface Seen {
  /** null: there is none yet. */
  journal: JournalFinding | null;
  /** Ids of the rigs that have a run by the journal. */
  runs: ReadonlySet<string>;
  /** The folder is ours until `release`, so that no agent can start at the same ports meanwhile. */
  mayProbe: boolean;
  release: () => Promise<void>;
}

/** Part of the bound at which a person is told: there is time to act. */
const TELL_FROM = 0.8;

/** Reads the journal as it lies on disk and mends nothing; with a running agent only its size. */
export async function lookAtJournal(
  { dataDir }: Pick<AgentConfig, 'dataDir'>,
  agentRuns: boolean,
  problems: Problem[],
): Promise<Seen> {
  const folder = join(dataDir, 'journal');
  const nothing = { journal: null, runs: new Set<string>(), release: () => Promise.resolve() };
  if (!(await isThere(folder))) return { ...nothing, mayProbe: !agentRuns };
  const lock = agentRuns ? null : await lockOrTell(folder, problems);
  const release = () => lock?.release() ?? Promise.resolve();
  try {
    const folders = await listGenerations(folder);
    const sizeBytes = await sizeOf(folders.map(({ path }) => path));
    const newest = folders.at(-1);
    const read = lock && newest ? await readGeneration(newest.path, RULES, { cutTorn: false }) : null;
    const journal: JournalFinding = {
      folder,
      sizeBytes,
      boundBytes: BOUND_BYTES,
      unacknowledged: read ? Math.max(0, read.index.lastSequence - read.acknowledged) : 0,
      damaged: read ? read.damage.length > 0 || read.unsettled : false,
    };
    problems.push(...problemsOf(journal, read));
    return { journal, runs: read ? runsIn(read) : new Set(), mayProbe: lock !== null, release };
  } catch (cause) {
    await release();
    throw cause;
  }
}

const RULES = { noteSchema: journalNoteSchema, isSnapshot };

async function isThere(path: string): Promise<boolean> {
  try {
    return (await stat(path)).isDirectory();
  } catch (cause) {
    if (fileErrorCode(cause) === 'ENOENT') return false;
    throw cause;
  }
}

async function lockOrTell(folder: string, problems: Problem[]): Promise<Lock | null> {
  try {
    return await takeLock(join(folder, 'lock'));
  } catch (error) {
    if (!(error instanceof JournalError)) throw error;
    const toDo = 'An agent starts or hangs: wait ten seconds and ask again, else restart it.';
    problems.push({ about: 'journal', code: error.code, says: error.message, toDo });
    return null;
  }
}

async function sizeOf(folders: string[]): Promise<number> {
  let sizeBytes = 0;
  for (const folder of folders) {
    for (const { path } of await listSegments(folder)) sizeBytes += (await stat(path)).size;
  }
  return sizeBytes;
}

function runsIn({ history }: Generation<JournalNote>): Set<string> {
  const active = [...remember(history)].filter(([, { run }]) => run?.began === true && !run.ended);
  return new Set(active.map(([rigId]) => rigId));
}

function problemsOf(journal: JournalFinding, read: Generation<JournalNote> | null): Problem[] {
  const found: Problem[] = (read?.damage ?? []).map(({ kind, path, offset }) => ({
    about: 'journal',
    code: 'journal-damaged',
    says: `${kind} in ${path} at byte ${offset}.`,
    toDo: 'Keep the file. The agent begins a new journal at its start and holds its runs: count their trays by hand.',
  }));
  if (journal.sizeBytes >= journal.boundBytes * TELL_FROM) {
    const share = Math.round((journal.sizeBytes / journal.boundBytes) * 100);
    const says = `The journal holds ${share} % of what it may: at 100 % no run is started.`;
    const toDo = 'Let the agent reach its server, so that it can hand over what it keeps.';
    found.push({ about: 'journal', code: 'journal-large', says, toDo });
  }
  return found;
}
