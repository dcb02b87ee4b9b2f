import { mkdir } from 'node:fs/promises';
import { join } from 'node:path';
import type { z } from 'zod';
import type { Damage } from './damage';
import { earlierSource, readableRecords, uploadable } from './earlier';
import type { EventSource, Journal } from './contract';
import { FileJournal } from './file-journal';
import { readGeneration, type Generation, type NoteRules } from './generation';
import { takeLock } from './lock';
import type { JournalRecord, SegmentHead, StoredRecord } from './records';
import { createGeneration, listGenerations, type Numbered } from './segment-files';

/** A segment is closed once it is this long. */
const SEGMENT_BYTES = 8 * 1024 * 1024;
/** At this size on disk the journal calls itself full: it still takes records, the core starts no run. */
export const BOUND_BYTES = 256 * 1024 * 1024;

export interface JournalOptions<Note> {
  /** The journal's own folder; made when missing. */
  dir: string;
  randomId: () => string;
  noteSchema: z.ZodType<Note>;
  /** Whether a note alone tells the whole state. Without one, nothing is ever removed from the disk. */
  isSnapshot?: (note: Note) => boolean;
  /** Told at opening for each thing that is not as it was written. */
  onDamage: (damage: Damage) => void;
  segmentBytes?: number;
  boundBytes?: number;
}

export interface OpenedJournal<Note> {
  journal: Journal<Note>;
  /** What is known, in order, from the last snapshot on. */
  history: JournalRecord<Note>[];
  /** Records were lost or altered. Stays true at every opening until `journal.settleDamage()`. */
  damaged: boolean;
}

/**
 * Opens the journal of this agent, or begins one. A torn last record is cut off. Any other damage is told, the
 * damaged files are left as they are, and a new journal begins that carries on what could be read.
 * @throws JournalError `journal-locked` when another process works in the folder
 */
export async function openJournal<Note>(options: JournalOptions<Note>): Promise<OpenedJournal<Note>> {
  await mkdir(options.dir, { recursive: true });
  const lock = await takeLock(join(options.dir, 'lock'));
  try {
    const rules: NoteRules<Note> = {
      noteSchema: options.noteSchema,
      isSnapshot: options.isSnapshot ?? (() => false),
    };
    const { folder, generation, earlier } = await currentGeneration(options, rules);
    const { history, unsettled: damaged } = generation;
    const journal = await FileJournal.open({
      folder,
      generation,
      earlier,
      lock,
      isSnapshot: rules.isSnapshot,
      segmentBytes: options.segmentBytes ?? SEGMENT_BYTES,
      boundBytes: options.boundBytes ?? BOUND_BYTES,
    });
    return { journal, history, damaged };
  } catch (cause) {
    await lock.release();
    throw cause;
  }
}

interface Current<Note> {
  folder: string;
  generation: Generation<Note>;
  earlier: EventSource[];
}

async function currentGeneration<Note>(
  options: JournalOptions<Note>,
  rules: NoteRules<Note>,
): Promise<Current<Note>> {
  const folders = await listGenerations(options.dir);
  const newest = folders.at(-1);
  if (!newest) return beginFirst(options, rules);
  let generation = await readGeneration(newest.path, rules, { cutTorn: true });
  let folder = newest.path;
  const damagedFolders = folders.slice(0, -1);
  if (generation.damage.length > 0) {
    for (const damage of generation.damage) options.onDamage(damage);
    folder = await beginSuccessor(options, rules, newest, generation);
    generation = await readGeneration(folder, rules, { cutTorn: true });
    damagedFolders.push(newest);
  }
  return { folder, generation, earlier: await earlierSources(damagedFolders, rules) };
}

async function beginFirst<Note>(
  options: JournalOptions<Note>,
  rules: NoteRules<Note>,
): Promise<Current<Note>> {
  const folder = await createGeneration(options.dir, 1, [firstHead(options.randomId(), false)]);
  return { folder, generation: await readGeneration(folder, rules, { cutTorn: true }), earlier: [] };
}

async function earlierSources<Note>(folders: Numbered[], rules: NoteRules<Note>): Promise<EventSource[]> {
  const sources: EventSource[] = [];
  for (const { path } of folders) {
    const generation = await readGeneration(path, rules, { cutTorn: false });
    const source = await earlierSource(path, generation, rules.noteSchema);
    if (source) sources.push(source);
  }
  return sources;
}

/**
 * Begins the journal that follows a damaged one. It repeats the history, so that the state is known at the next
 * opening too; events that can go up under the old id are repeated as told, those behind a gap get new numbers.
 */
async function beginSuccessor<Note>(
  options: JournalOptions<Note>,
  rules: NoteRules<Note>,
  damaged: Numbered,
  generation: Generation<Note>,
): Promise<string> {
  const records = await readableRecords(generation, rules.noteSchema);
  const through = generation.acknowledged + uploadable(generation, records).length;
  const stateFrom = records.findLastIndex(
    (record) => record.type === 'note' && rules.isSnapshot(record.note),
  );
  const carried: StoredRecord<Note>[] = [];
  let sequence = 0;
  for (const [position, record] of records.entries()) {
    if (record.type === 'event' && record.event.sequence > through) {
      sequence += 1;
      carried.push({ type: 'event', event: { ...record.event, sequence } });
    } else if (position >= stateFrom && record.type !== 'settled') {
      carried.push(record.type === 'event' ? { type: 'told', event: record.event } : record);
    }
  }
  return createGeneration(options.dir, damaged.number + 1, [firstHead(options.randomId(), true), ...carried]);
}

/** The head of a journal's first segment. */
function firstHead(journalId: string, afterDamage: boolean): SegmentHead {
  return { type: 'head', journalId, segment: 1, nextSequence: 1, afterDamage };
}
