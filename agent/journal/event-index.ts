import { createReadStream } from 'node:fs';
import type { AgentEvent } from '@/lib/protocol/events';
import { eventSchema } from '@/lib/protocol/events';
import { z } from 'zod';
import { decodeCheckedLine } from './checked-line';

/** Every so many events the index notes where one stands. */
const STRIDE = 128;
/** So many of the newest events stay in memory: an upload that keeps up never reads the disk. */
const RECENT_MAX = 1024;

interface Mark {
  sequence: number;
  path: string;
  offset: number;
}

const eventLineSchema = z.object({ type: z.literal('event'), event: eventSchema });

/** Finds durable events by sequence: the newest from memory, older ones on disk from the nearest mark. */
export class EventIndex {
  #marks: Mark[] = [];
  #recent: AgentEvent[] = [];
  #last: number;

  /** @param last the sequence before the first event that will be added */
  constructor(last: number) {
    this.#last = last;
  }

  get lastSequence(): number {
    return this.#last;
  }

  /** Takes the next event and the place where it stands. */
  add(event: AgentEvent, path: string, offset: number): void {
    const newest = this.#marks.at(-1);
    if (newest?.path !== path || event.sequence - newest.sequence >= STRIDE) {
      this.#marks.push({ sequence: event.sequence, path, offset });
    }
    this.#recent.push(event);
    if (this.#recent.length > 2 * RECENT_MAX) this.#recent = this.#recent.slice(-RECENT_MAX);
    this.#last = event.sequence;
  }

  /** Forgets what stands in a removed file. */
  forget(path: string): void {
    this.#marks = this.#marks.filter((mark) => mark.path !== path);
  }

  /** Events from `sequence` on, at most `limit`; fewer when the file ends, none when nothing is there. */
  async from(sequence: number, limit: number): Promise<AgentEvent[]> {
    const first = this.#recent[0]?.sequence;
    if (first !== undefined && sequence >= first) {
      return this.#recent.slice(sequence - first, sequence - first + limit);
    }
    const mark = this.#marks.findLast((candidate) => candidate.sequence <= sequence);
    return mark ? readEvents(mark, sequence, Math.min(limit, this.#last - sequence + 1)) : [];
  }
}

async function readEvents(mark: Mark, sequence: number, limit: number): Promise<AgentEvent[]> {
  const found: AgentEvent[] = [];
  if (limit <= 0) return found;
  for await (const line of readLines(mark.path, mark.offset)) {
    const parsed = eventLineSchema.safeParse(decodeCheckedLine(line));
    if (parsed.success && parsed.data.event.sequence >= sequence) found.push(parsed.data.event);
    if (found.length >= limit) break;
  }
  return found;
}

async function* readLines(path: string, offset: number): AsyncGenerator<Buffer> {
  let rest = Buffer.alloc(0);
  for await (const chunk of createReadStream(path, { start: offset })) {
    rest = Buffer.concat([rest, Buffer.from(chunk)]);
    let begin = 0;
    for (let end = rest.indexOf('\n'); end !== -1; end = rest.indexOf('\n', begin)) {
      yield rest.subarray(begin, end);
      begin = end + 1;
    }
    rest = rest.subarray(begin);
  }
}
