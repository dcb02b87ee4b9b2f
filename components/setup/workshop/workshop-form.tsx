'use client';

import type { WorkshopDto } from '@/lib/schemas/setup-workshop';
import { FormNumber, FormText } from '../form/fields';
import { numberOf, textOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';

/** The workshop's own settings. */
export function WorkshopForm({ workshop, action }: { workshop: WorkshopDto; action: SetupAction }) {
  return (
    <SetupForm
      action={action}
      read={(form) => ({
        name: textOf(form, 'name'),
        timeZone: textOf(form, 'timeZone').trim(),
        shiftStarts: textOf(form, 'shiftStarts')
          .split(/[\s,;]+/)
          .filter(Boolean),
        firstPieces: numberOf(form, 'firstPieces'),
        lotPiecesMost: numberOf(form, 'lotPiecesMost'),
        toleranceMinusMm: numberOf(form, 'toleranceMinusMm'),
        tolerancePlusMm: numberOf(form, 'tolerancePlusMm'),
      })}
      submit="Save"
      done="Saved."
    >
      <FormText path="name" label="Name of the workshop" defaultValue={workshop.name} />
      <FormText path="timeZone" label="Time zone" defaultValue={workshop.timeZone} />
      <FormText
        path="shiftStarts"
        label="Shifts begin at"
        defaultValue={workshop.shiftStarts.join(', ')}
        hint="Full notes are read once a shift."
      />
      <FormNumber
        path="firstPieces"
        label="First pieces to measure"
        defaultValue={workshop.firstPieces}
        hint="The rig waits after so many; 0 for never."
      />
      <FormNumber path="lotPiecesMost" label="Most pieces in one lot" defaultValue={workshop.lotPiecesMost} />
      <FormNumber
        path="toleranceMinusMm"
        label="Usual tolerance: shorter by, mm"
        defaultValue={workshop.toleranceMinusMm}
      />
      <FormNumber
        path="tolerancePlusMm"
        label="Usual tolerance: longer by, mm"
        defaultValue={workshop.tolerancePlusMm}
      />
    </SetupForm>
  );
}
