import { z } from 'zod';
import { eventSchema, type AgentEvent } from '@/lib/protocol/events';

/** What the journal gives back at opening, in the order of writing. */
export type JournalRecord<Note> = { type: 'event'; event: AgentEvent } | { type: 'note'; note: Note };

/** First line of every segment: which journal it belongs to and what comes before it. */
export const segmentHeadSchema = z.object({
  type: z.literal('head'),
  journalId: z.uuid(),
  segment: z.number().int().min(1),
  /** The sequence of the next event, whether it stands in this segment or later. */
  nextSequence: z.number().int().min(1),
  /** This journal was begun because an earlier one was damaged. */
  afterDamage: z.boolean(),
});
export type SegmentHead = z.infer<typeof segmentHeadSchema>;

/**
 * A stored line that is not a head. `told`: an event of a damaged earlier journal that belongs to the history but
 * goes up under that journal's id. `settled`: the core has acted on the damage.
 */
export type StoredRecord<Note> =
  JournalRecord<Note> | { type: 'told'; event: AgentEvent } | { type: 'settled' };

const storedSchema = z.discriminatedUnion('type', [
  z.object({ type: z.literal('event'), event: eventSchema }),
  z.object({ type: z.literal('told'), event: eventSchema }),
  z.object({ type: z.literal('note'), note: z.unknown() }),
  z.object({ type: z.literal('settled') }),
]);

/** @returns the record, or null for one that this software does not know */
export function parseStoredRecord<Note>(
  value: unknown,
  noteSchema: z.ZodType<Note>,
): StoredRecord<Note> | null {
  const stored = storedSchema.safeParse(value);
  if (!stored.success) return null;
  if (stored.data.type !== 'note') return stored.data;
  const note = noteSchema.safeParse(stored.data.note);
  return note.success ? { type: 'note', note: note.data } : null;
}
