import { setTimeout as sleep } from 'node:timers/promises';
import { fileErrorCode } from './durable-file';
import { JournalError } from './errors';
import type { OpenSegment } from './segment-files';

/** A line on its way to the disk. `committed` runs once it is synced at `offset` of `segment`. */
export interface Entry {
  line: Buffer;
  committed: (segment: OpenSegment, offset: number) => void;
  failed: (cause: JournalError) => void;
}

interface Options {
  /** The segment to write to now; rolls to a new one when the last is long enough. */
  segment: () => Promise<OpenSegment>;
  /** After each sync, when all its entries are committed. */
  afterCommit: () => void;
}

/** The disk has no room: what was written is taken back and tried again until there is room. */
const NO_ROOM = new Set(['ENOSPC', 'EDQUOT']);
const ROOM_RETRY_MS = 250;
/** At most so much goes to the disk in one write. */
const BATCH_MAX_BYTES = 1_000_000;

/** Writes lines in order, as many as are waiting with one `fdatasync`. */
export class CommitQueue {
  #waiting: Entry[] = [];
  #running: Promise<void> | null = null;
  /** Set: nothing more is taken. */
  #failure: JournalError | null = null;
  #outOfRoom = false;

  constructor(private readonly options: Options) {}

  /** The disk has no room for what is waiting. */
  get outOfRoom(): boolean {
    return this.#outOfRoom;
  }

  get failure(): JournalError | null {
    return this.#failure;
  }

  push(entry: Entry): void {
    if (this.#failure) return entry.failed(this.#failure);
    this.#waiting.push(entry);
    this.#running ??= this.#run();
  }

  /** Takes nothing more. What waits for room is given up, what is being written is finished. */
  async close(): Promise<void> {
    const closed = new JournalError('journal-closed', 'the journal is closed');
    this.#failure ??= closed;
    if (this.#outOfRoom) this.#fail(closed);
    await this.#running;
  }

  async #run(): Promise<void> {
    while (this.#waiting.length > 0) {
      const batch = this.#nextBatch();
      try {
        const segment = await this.options.segment();
        await this.#commit(segment, batch);
      } catch (cause) {
        await this.#afterFailure(cause);
      }
    }
    // In the same step as the last look at the queue: an entry pushed later starts a new round.
    this.#running = null;
  }

  #nextBatch(): Entry[] {
    let bytes = 0;
    const end = this.#waiting.findIndex((entry) => (bytes += entry.line.length) > BATCH_MAX_BYTES);
    return this.#waiting.slice(0, end === -1 ? undefined : Math.max(end, 1));
  }

  async #commit(segment: OpenSegment, batch: Entry[]): Promise<void> {
    await writeAndSync(segment, Buffer.concat(batch.map((entry) => entry.line)));
    this.#outOfRoom = false;
    this.#waiting.splice(0, batch.length);
    for (const entry of batch) {
      const offset = segment.sizeBytes;
      segment.sizeBytes += entry.line.length;
      entry.committed(segment, offset);
    }
    this.options.afterCommit();
  }

  async #afterFailure(cause: unknown): Promise<void> {
    if (!NO_ROOM.has(fileErrorCode(cause) ?? '')) {
      // After a failed sync the kernel may call lost pages clean: only a new start can tell what is on disk.
      this.#fail(new JournalError('journal-failed', 'the journal cannot be written', { cause }));
      return;
    }
    this.#outOfRoom = true;
    if (this.#failure) this.#fail(this.#failure);
    else await sleep(ROOM_RETRY_MS);
  }

  #fail(failure: JournalError): void {
    this.#failure ??= failure;
    for (const entry of this.#waiting.splice(0)) entry.failed(failure);
  }
}

/** Appends at the end of what is synced; takes it back when there is no room, so that no half line stays. */
async function writeAndSync(segment: OpenSegment, bytes: Buffer): Promise<void> {
  try {
    let written = 0;
    while (written < bytes.length) {
      const position = segment.sizeBytes + written;
      const result = await segment.handle.write(bytes, written, bytes.length - written, position);
      written += result.bytesWritten;
    }
    await segment.handle.datasync();
  } catch (cause) {
    await segment.handle.truncate(segment.sizeBytes);
    throw cause;
  }
}
