import { z } from 'zod';
import { rememberedSchema } from './memory';

const ofRig = { rigId: z.uuid() };
const ofRun = { ...ofRig, runId: z.uuid() };
const piece = z.number().int().min(1).max(9999);

/** What the agent must still know after it dies and the server need not hear: local entries of the journal. */
export const journalNoteSchema = z.discriminatedUnion('note', [
  /** A command that may move something was carried out; it is refused when it comes again. */
  z.object({ note: z.literal('command-taken'), ...ofRig, commandId: z.uuid() }),
  z.object({ note: z.literal('fence'), ...ofRig, fence: z.number().int().min(0) }),
  /** Homing begins: what the register shows is not to be trusted until it is written again. */
  z.object({ note: z.literal('homing'), ...ofRun, measureAgain: z.boolean() }),
  /** The register was written at standby; `standbyCount` is the cut axis there in steps, null where not told. */
  z.object({ note: z.literal('registered'), ...ofRun, standbyCount: z.number().int().nullable() }),
  /** Written before the line that closes the jaws on a piece: from here on the piece is open (law 3). */
  z.object({ note: z.literal('cut-commanded'), ...ofRun, piece }),
  /** The open cut is known to be no good piece (refused, or not where it must be): it will be cut anew. */
  z.object({ note: z.literal('cut-void'), ...ofRun, piece }),
  /** The rig homes and trims before it moves on; with `measureAgain` its first pieces are measured again. */
  z.object({ note: z.literal('must-home'), ...ofRun, measureAgain: z.boolean() }),
  /** A person found a first piece wrong: as many again are measured from here. */
  z.object({ note: z.literal('measure-again'), ...ofRun }),
  /** Stopping was asked for; it ends when the rig stands still. */
  z.object({ note: z.literal('run-stopping'), ...ofRun, personId: z.uuid().nullable() }),
  z.object({ note: z.literal('tray-cleared'), ...ofRun }),
  /** Everything that the notes and events before it say, so that they need not be read again. */
  z.object({
    note: z.literal('snapshot'),
    rigs: z.array(z.object({ rigId: z.uuid(), memory: rememberedSchema })),
  }),
]);

export type JournalNote = z.infer<typeof journalNoteSchema>;

/** Whether a note alone tells all that came before it. */
export function isSnapshot(note: JournalNote): boolean {
  return note.note === 'snapshot';
}
