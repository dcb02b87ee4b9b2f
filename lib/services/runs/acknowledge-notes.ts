import { and, desc, eq } from 'drizzle-orm';
import { interlockNotes } from '@/db/schema/rigs';
import { acknowledgements } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import { shiftBeganAt } from '@/lib/fleet/shift';
import { acknowledgeNotesSchema } from '@/lib/schemas/run';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { tell } from '../tell';
import { inTransaction } from '../transaction';
import { readWorkshop } from '../workshop/read-workshop';
import { lockRun } from './lock-run';

/** When this person last confirmed the full text of these notes in the running shift; null: it must be read now. */
export async function fullReadAt(
  ctx: ServiceContext,
  personId: string,
  notesId: string,
): Promise<Date | null> {
  const { shiftStarts, timeZone } = await readWorkshop({ ctx });
  const [last] = await ctx.db
    .select({ at: acknowledgements.at })
    .from(acknowledgements)
    .where(
      and(
        eq(acknowledgements.personId, personId),
        eq(acknowledgements.notesId, notesId),
        eq(acknowledgements.full, true),
      ),
    )
    .orderBy(desc(acknowledgements.at))
    .limit(1);
  return last && last.at >= shiftBeganAt(ctx.now, shiftStarts, timeZone) ? last.at : null;
}

/** The notes in force on a rig: the newest version; undefined when it has none. */
export async function notesInForce(ctx: ServiceContext, rigId: string) {
  const [notes] = await ctx.db
    .select()
    .from(interlockNotes)
    .where(eq(interlockNotes.rigId, rigId))
    .orderBy(desc(interlockNotes.version))
    .limit(1);
  return notes;
}

/**
 * A person says that they read the notes for this run: the short list every time; the full text too (`full`) at its
 * first use in a shift and whenever the notes changed.
 * @throws EllwandError `changed-meanwhile` when other notes are in force, `notes-not-acknowledged` when the full text
 * is due and was not confirmed, `illegal-step` when the run is over.
 */
export async function acknowledgeNotes({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<void> {
  const { personId } = authorise(ctx, 'runs.operate');
  const { runId, notesVersion, full } = parseInput(acknowledgeNotesSchema, input);
  await inTransaction(ctx, async (inner) => {
    const { rig, run } = await lockRun(inner, runId);
    if (!['prepared', 'cutting', 'paused', 'held'].includes(run.state))
      throw new EllwandError('illegal-step');
    const notes = await notesInForce(inner, rig.id);
    if (notes?.version !== notesVersion) throw new EllwandError('changed-meanwhile');
    if (!full && !(await fullReadAt(inner, personId, notes.id))) {
      throw new EllwandError('notes-not-acknowledged', { details: { full: true } });
    }
    await inner.db
      .insert(acknowledgements)
      .values({ runId, rigId: rig.id, notesId: notes.id, personId, full, at: inner.now });
    await tell(inner, { news: 'rig', rigId: rig.id });
  });
}
