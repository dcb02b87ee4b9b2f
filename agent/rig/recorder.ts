import type { Journal } from '@/agent/journal/contract';
import type { JournalRecord } from '@/agent/journal/records';
import type { Remembered } from '@/agent/runner/memory';
import type { JournalNote } from '@/agent/runner/notes';
import { remember, rememberEntry } from '@/agent/runner/remember';
import type { EventBody } from '@/lib/protocol/events';

type RecordingJournal = Pick<Journal<JournalNote>, 'appendEvent' | 'appendNote' | 'wantsSnapshot' | 'full'>;

/** Writes to the journal and keeps in mind what it says, so that a snapshot can stand for all before it. */
export interface Recorder {
  event(body: EventBody, at: Date): Promise<void>;
  note(note: JournalNote): Promise<void>;
  memoryOf(rigId: string): Remembered | null;
  /** No run may be started: the disk has no room for what it would have to tell. */
  readonly full: boolean;
}

export function createRecorder(
  journal: RecordingJournal,
  history: Iterable<JournalRecord<JournalNote>>,
): Recorder {
  const rigs = remember(history);
  const snapshotWhenWanted = async () => {
    if (!journal.wantsSnapshot) return;
    const memories = [...rigs].map(([rigId, memory]) => ({ rigId, memory: structuredClone(memory) }));
    await journal.appendNote({ note: 'snapshot', rigs: memories });
  };
  return {
    async event(body, at) {
      rememberEntry(rigs, { type: 'event', event: { body } });
      await journal.appendEvent(body, at);
      await snapshotWhenWanted();
    },
    async note(note) {
      rememberEntry(rigs, { type: 'note', note });
      await journal.appendNote(note);
      await snapshotWhenWanted();
    },
    memoryOf: (rigId) => rigs.get(rigId) ?? null,
    get full() {
      return journal.full;
    },
  };
}
