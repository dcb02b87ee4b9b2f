import { open, unlink } from 'node:fs/promises';
import { eventBodySchema, type AgentEvent, type EventBody } from '@/lib/protocol/events';
import { AcknowledgedFile } from './acknowledged';
import { encodeCheckedLine } from './checked-line';
import { CommitQueue } from './commit-queue';
import { JournalError } from './errors';
import type { EventIndex } from './event-index';
import type { EventSource, Journal } from './contract';
import type { Generation } from './generation';
import type { Lock } from './lock';
import type { SegmentHead, StoredRecord } from './records';
import { createSegment, type OpenSegment } from './segment-files';
import { SegmentShelf } from './segment-shelf';

interface Parts<Note> {
  folder: string;
  generation: Generation<Note>;
  earlier: readonly EventSource[];
  lock: Lock;
  isSnapshot: (note: Note) => boolean;
  segmentBytes: number;
  boundBytes: number;
}

/** The journal on disk: one folder of numbered segments, the last one growing. */
export class FileJournal<Note> implements Journal<Note> {
  readonly id: string;
  readonly earlier: readonly EventSource[];
  #assigned: number;
  #unsettled: boolean;
  #eventsCommitted = false;
  readonly #index: EventIndex;
  readonly #queue: CommitQueue;
  readonly #acknowledged: AcknowledgedFile;
  readonly #shelf: SegmentShelf;
  readonly #listeners = new Set<() => void>();

  static async open<Note>(parts: Parts<Note>): Promise<FileJournal<Note>> {
    const { journalId, segments } = parts.generation;
    const newest = segments.at(-1);
    if (!journalId || !newest) throw new JournalError('journal-failed', 'the journal has no segment');
    const handle = await open(newest.path, 'r+');
    // Lines that were written but not synced before a crash count from here on: make them durable first.
    await handle.sync();
    return new FileJournal(parts, journalId, { ...newest, handle });
  }

  private constructor(
    private readonly parts: Parts<Note>,
    journalId: string,
    private current: OpenSegment,
  ) {
    const { generation, folder } = parts;
    this.id = journalId;
    this.earlier = parts.earlier;
    this.#unsettled = generation.unsettled;
    this.#index = generation.index;
    this.#assigned = generation.index.lastSequence;
    this.#acknowledged = new AcknowledgedFile(folder, journalId, generation.acknowledged);
    this.#shelf = new SegmentShelf(generation.segments, generation.snapshotSegment);
    this.#queue = new CommitQueue({
      segment: () => this.#writable(),
      afterCommit: () => this.#afterCommit(),
    });
  }

  get lastSequence(): number {
    return this.#index.lastSequence;
  }

  get acknowledged(): number {
    return this.#acknowledged.through;
  }

  get full(): boolean {
    return this.#queue.outOfRoom || this.#shelf.sizeBytes >= this.parts.boundBytes;
  }

  get wantsSnapshot(): boolean {
    return this.#shelf.wantsSnapshot;
  }

  async appendEvent(body: EventBody, at: Date): Promise<number> {
    const parsed = eventBodySchema.parse(body);
    const event: AgentEvent = { sequence: this.#assigned + 1, at: at.toISOString(), body: parsed };
    const committed = this.#append({ type: 'event', event });
    this.#assigned = event.sequence;
    await committed;
    return event.sequence;
  }

  async appendNote(note: Note): Promise<void> {
    await this.#append({ type: 'note', note });
  }

  async settleDamage(): Promise<void> {
    if (!this.#unsettled) return;
    await this.#append({ type: 'settled' });
    this.#unsettled = false;
  }

  eventsFrom(sequence: number, limit: number): Promise<AgentEvent[]> {
    return this.#index.from(sequence, limit);
  }

  async acknowledge(through: number): Promise<void> {
    await this.#acknowledged.raise(Math.min(through, this.lastSequence));
    await this.#removeOld();
  }

  onAppend(listener: () => void): () => void {
    this.#listeners.add(listener);
    return () => this.#listeners.delete(listener);
  }

  async close(): Promise<void> {
    await this.#queue.close();
    await this.current.handle.close();
    await this.parts.lock.release();
  }

  #append(record: StoredRecord<Note>): Promise<void> {
    const line = encodeCheckedLine(record);
    return new Promise((resolve, reject) => {
      const committed = (segment: OpenSegment, offset: number) => {
        this.#noteCommitted(record, line, segment, offset);
        resolve();
      };
      this.#queue.push({ line, committed, failed: reject });
    });
  }

  #noteCommitted(record: StoredRecord<Note>, line: Buffer, segment: OpenSegment, offset: number): void {
    if (record.type === 'event') {
      this.#index.add(record.event, segment.path, offset);
      this.#eventsCommitted = true;
    }
    const snapshot = record.type === 'note' && this.parts.isSnapshot(record.note);
    this.#shelf.grow(line.length, this.lastSequence, snapshot);
  }

  #afterCommit(): void {
    if (!this.#eventsCommitted) return;
    this.#eventsCommitted = false;
    for (const listener of this.#listeners) listener();
  }

  async #writable(): Promise<OpenSegment> {
    if (this.current.sizeBytes < this.parts.segmentBytes) return this.current;
    const head: SegmentHead = {
      type: 'head',
      journalId: this.id,
      segment: this.current.number + 1,
      nextSequence: this.lastSequence + 1,
      afterDamage: this.#unsettled,
    };
    const next = await createSegment(this.parts.folder, head);
    const { number, path, sizeBytes } = next;
    this.#shelf.add({ number, path, sizeBytes, lastSequence: this.lastSequence });
    await this.current.handle.close();
    this.current = next;
    return next;
  }

  async #removeOld(): Promise<void> {
    const removable = this.#shelf.takeRemovable(this.acknowledged);
    if (removable.length === 0) return;
    await this.#acknowledged.sync();
    for (const segment of removable) {
      await unlink(segment.path);
      this.#index.forget(segment.path);
    }
  }
}
