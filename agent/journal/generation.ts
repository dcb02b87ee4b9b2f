import { readFile, truncate } from 'node:fs/promises';
import type { z } from 'zod';
import { readAcknowledged } from './acknowledged';
import type { Damage } from './damage';
import { EventIndex } from './event-index';
import type { JournalRecord, StoredRecord } from './records';
import { listSegments, type Numbered } from './segment-files';
import { scanSegment, type SegmentScan } from './segment-scan';

export interface NoteRules<Note> {
  noteSchema: z.ZodType<Note>;
  /** Whether a note alone tells the whole state, so that nothing before it is needed to know it. */
  isSnapshot: (note: Note) => boolean;
}

export interface KeptSegment extends Numbered {
  sizeBytes: number;
  /** The sequence of the last event in it or before it. */
  lastSequence: number;
}

/** One journal as it lies on disk. */
export interface Generation<Note> {
  /** null: no head could be read. */
  journalId: string | null;
  /** Begun because an earlier one was damaged, and the core has not yet settled that. */
  unsettled: boolean;
  segments: KeptSegment[];
  /** From the last snapshot on. */
  history: JournalRecord<Note>[];
  /** Number of the segment with the last snapshot; 0: there is none. */
  snapshotSegment: number;
  index: EventIndex;
  acknowledged: number;
  damage: Damage[];
}

/**
 * Reads a journal's folder. With `cutTorn`, what an interrupted write left at its very end is cut off; the files of
 * a damaged journal are never changed.
 */
export async function readGeneration<Note>(
  folder: string,
  rules: NoteRules<Note>,
  { cutTorn }: { cutTorn: boolean },
): Promise<Generation<Note>> {
  const reader = new GenerationReader(rules);
  const files = await listSegments(folder);
  if (files.length === 0) reader.report('segment-missing', folder, 0);
  for (const file of files) {
    const bytes = await readFile(file.path);
    const scan = scanSegment(bytes, rules.noteSchema);
    const newest = file === files.at(-1);
    if (scan.tornAt !== null && newest && cutTorn) await truncate(file.path, scan.tornAt);
    if (scan.tornAt !== null && !newest) reader.report('unreadable', file.path, scan.tornAt);
    reader.take(file, scan, scan.tornAt ?? bytes.length);
  }
  return reader.finish(folder, await readAcknowledged(folder));
}

class GenerationReader<Note> {
  #generation: Generation<Note> | null = null;
  #damage: Damage[] = [];
  #nextSegment = 0;
  #nextSequence = 1;
  #firstSequence = 1;

  constructor(private readonly rules: NoteRules<Note>) {}

  report(kind: Damage['kind'], path: string, offset: number): void {
    this.#damage.push({ kind, path, offset });
  }

  take(file: Numbered, scan: SegmentScan<Note>, sizeBytes: number): void {
    for (const { fault, offset } of scan.faults) this.report(fault, file.path, offset);
    this.#generation ??= this.#begin(scan);
    const generation = this.#generation;
    this.#checkHead(generation, file, scan);
    for (const { offset, record } of scan.lines) this.#takeRecord(generation, file, offset, record);
    const lastSequence = this.#nextSequence - 1;
    generation.segments.push({ number: file.number, path: file.path, sizeBytes, lastSequence });
    this.#nextSegment = file.number + 1;
  }

  #begin({ head }: SegmentScan<Note>): Generation<Note> {
    this.#nextSequence = this.#firstSequence = head?.nextSequence ?? 1;
    this.#nextSegment = head?.segment ?? 1;
    return { ...emptyGeneration<Note>(this.#nextSequence - 1), unsettled: head?.afterDamage ?? false };
  }

  #checkHead(generation: Generation<Note>, file: Numbered, { head }: SegmentScan<Note>): void {
    if (file.number !== this.#nextSegment) this.report('segment-missing', file.path, 0);
    if (!head) return this.report('head-wrong', file.path, 0);
    generation.journalId ??= head.journalId;
    if (head.journalId !== generation.journalId || head.segment !== file.number) {
      this.report('head-wrong', file.path, 0);
    }
    if (head.nextSequence !== this.#nextSequence) {
      this.report('events-missing', file.path, 0);
      this.#nextSequence = Math.max(this.#nextSequence, head.nextSequence);
    }
  }

  #takeRecord(
    generation: Generation<Note>,
    file: Numbered,
    offset: number,
    record: StoredRecord<Note>,
  ): void {
    if (record.type === 'settled') {
      generation.unsettled = false;
      return;
    }
    if (record.type === 'note' && this.rules.isSnapshot(record.note)) {
      generation.history = [];
      generation.snapshotSegment = file.number;
    }
    generation.history.push(record.type === 'told' ? { type: 'event', event: record.event } : record);
    if (record.type !== 'event') return;
    if (record.event.sequence !== this.#nextSequence) this.report('events-missing', file.path, offset);
    this.#nextSequence = record.event.sequence + 1;
    generation.index.add(record.event, file.path, offset);
  }

  finish(folder: string, noted: { journalId: string; through: number } | null): Generation<Note> {
    const generation = this.#generation ?? emptyGeneration<Note>(0);
    const first = generation.segments[0];
    generation.journalId ??= noted?.journalId ?? null;
    const removed = this.#firstSequence - 1;
    const through = noted && noted.journalId === generation.journalId ? noted.through : removed;
    // Segments are removed only after the acknowledgement is synced and a snapshot follows.
    const wronglyRemoved = through < removed || generation.snapshotSegment === 0;
    if (first && first.number > 1 && wronglyRemoved) this.report('segment-missing', folder, 0);
    if (through > generation.index.lastSequence) this.report('end-missing', folder, 0);
    generation.acknowledged = through;
    generation.damage = this.#damage;
    return generation;
  }
}

function emptyGeneration<Note>(lastSequence: number): Generation<Note> {
  return {
    journalId: null,
    unsettled: false,
    segments: [],
    history: [],
    snapshotSegment: 0,
    index: new EventIndex(lastSequence),
    acknowledged: 0,
    damage: [],
  };
}
