import { readFile, rename, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';
import { decodeCheckedLine, encodeCheckedLine } from './checked-line';
import { fileErrorCode, writeDurably } from './durable-file';

const acknowledgedSchema = z.object({ journalId: z.uuid(), through: z.number().int().min(0) });
export type Acknowledged = z.infer<typeof acknowledgedSchema>;

const pathIn = (folder: string) => join(folder, 'acknowledged');

/** Up to which event the server has said "stored"; null when nothing (readable) was noted. */
export async function readAcknowledged(folder: string): Promise<Acknowledged | null> {
  try {
    const line = await readFile(pathIn(folder));
    const parsed = acknowledgedSchema.safeParse(decodeCheckedLine(line.subarray(0, -1)));
    return parsed.success ? parsed.data : null;
  } catch (cause) {
    if (fileErrorCode(cause) === 'ENOENT') return null;
    throw cause;
  }
}

/** Writes the newest number whenever the one before is written: at most one write at a time, none queued up. */
export class AcknowledgedFile {
  #through: number;
  #wanted: number;
  #writing: Promise<void> | null = null;

  constructor(
    private readonly folder: string,
    private readonly journalId: string,
    through: number,
  ) {
    this.#through = through;
    this.#wanted = through;
  }

  get through(): number {
    return this.#wanted;
  }

  /** Not synced: losing it means that events go up twice, and the server stores them once. */
  async raise(through: number): Promise<void> {
    this.#wanted = Math.max(this.#wanted, through);
    if (this.#through < this.#wanted) await (this.#writing ??= this.#write());
  }

  /** Makes the number outlast a power loss, before anything is removed because of it. */
  async sync(): Promise<void> {
    while (this.#writing) await this.#writing;
    await (this.#writing = this.#writeSynced());
  }

  async #write(): Promise<void> {
    try {
      while (this.#through < this.#wanted) {
        const through = this.#wanted;
        const draft = `${pathIn(this.folder)}.draft`;
        await writeFile(draft, this.#line(through));
        await rename(draft, pathIn(this.folder));
        this.#through = through;
      }
    } finally {
      this.#writing = null;
    }
  }

  async #writeSynced(): Promise<void> {
    try {
      await writeDurably(pathIn(this.folder), this.#line(this.#wanted));
    } finally {
      this.#writing = null;
    }
  }

  #line(through: number): Buffer {
    return encodeCheckedLine({ journalId: this.journalId, through } satisfies Acknowledged);
  }
}
