import type { z } from 'zod';
import { readFile } from 'node:fs/promises';
import type { AgentEvent } from '@/lib/protocol/events';
import { AcknowledgedFile } from './acknowledged';
import type { EventSource } from './contract';
import type { Generation } from './generation';
import type { StoredRecord } from './records';
import { scanSegment } from './segment-scan';

/** All records of a damaged journal that can still be read, in file order. */
export async function readableRecords<Note>(
  generation: Generation<Note>,
  noteSchema: z.ZodType<Note>,
): Promise<StoredRecord<Note>[]> {
  const records: StoredRecord<Note>[] = [];
  for (const segment of generation.segments) {
    const scan = scanSegment(await readFile(segment.path), noteSchema);
    for (const line of scan.lines) records.push(line.record);
  }
  return records;
}

/**
 * The events of a damaged journal that can still go up under its own id: those that follow what is acknowledged
 * without a gap. The rest is carried over into the journal that came after it.
 */
export function uploadable<Note>(
  generation: Generation<Note>,
  records: readonly StoredRecord<Note>[],
): AgentEvent[] {
  const events: AgentEvent[] = [];
  if (generation.journalId === null) return events;
  for (const record of records) {
    const next = generation.acknowledged + events.length + 1;
    if (record.type === 'event' && record.event.sequence === next) events.push(record.event);
  }
  return events;
}

/** What is left to go up of a damaged journal; null when nothing is. */
export async function earlierSource<Note>(
  folder: string,
  generation: Generation<Note>,
  noteSchema: z.ZodType<Note>,
): Promise<EventSource | null> {
  const events = uploadable(generation, await readableRecords(generation, noteSchema));
  const last = events.at(-1);
  if (generation.journalId === null || !last) return null;
  const file = new AcknowledgedFile(folder, generation.journalId, generation.acknowledged);
  const first = generation.acknowledged + 1;
  return {
    id: generation.journalId,
    lastSequence: last.sequence,
    get acknowledged() {
      return file.through;
    },
    eventsFrom: async (sequence, limit) =>
      sequence < first ? [] : events.slice(sequence - first, sequence - first + limit),
    acknowledge: (through) => file.raise(Math.min(through, last.sequence)),
  };
}
