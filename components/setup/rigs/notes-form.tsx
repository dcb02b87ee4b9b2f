'use client';

import { NOTES_POINTS_MAX, type RigSetupPageDto } from '@/lib/schemas/setup-rigs';
import { FormArea } from '../form/fields';
import { linesOf, textOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';

/** The interlock notes: the short list before every run, and the full text that is read when it is new. */
export function NotesForm({
  rigId,
  notes,
  action,
}: {
  rigId: string;
  notes: RigSetupPageDto['notes'];
  action: SetupAction;
}) {
  return (
    <SetupForm
      action={action}
      read={(form) => ({ rigId, points: linesOf(form, 'points'), fullText: textOf(form, 'fullText') })}
      submit="Publish the notes"
      done="Published. Everybody reads them in full before their next start."
    >
      <FormArea
        path="points"
        label="Before anything moves"
        rows={6}
        defaultValue={notes?.points.join('\n') ?? ''}
        hint={`One physical thing a line, at most ${NOTES_POINTS_MAX}: shown before every run.`}
      />
      <FormArea
        path="fullText"
        label="Full notes"
        rows={18}
        defaultValue={notes?.fullText ?? ''}
        hint="Your local safety rules and qualified people come first; say so here."
      />
    </SetupForm>
  );
}
