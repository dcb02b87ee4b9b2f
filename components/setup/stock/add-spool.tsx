'use client';

import type { WireDto } from '@/lib/schemas/stock';
import { fullWireName } from '@/lib/wire/name';
import { FormNumber, FormSelect, FormText } from '../form/fields';
import { numberOf, textOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';

/** The form for one more reel. Its length is typed in metres, as it stands on the reel. */
export function AddSpool({ wires, action }: { wires: WireDto[]; action: SetupAction }) {
  return (
    <SetupForm
      action={action}
      read={(form) => ({
        label: textOf(form, 'label'),
        wireId: textOf(form, 'wireId'),
        lengthMm: numberOf(form, 'lengthMm') * 1000,
        place: textOf(form, 'place'),
      })}
      submit="Add"
      done="Added."
      clears
    >
      <h2 className="text-xl">Add a spool</h2>
      <FormText path="label" label="Label" hint="What is written on the reel, like S-0421." />
      <FormSelect path="wireId" label="Wire" defaultValue="">
        <option value="">Pick a wire</option>
        {wires.map((wire) => (
          <option key={wire.id} value={wire.id}>
            {fullWireName(wire)}
          </option>
        ))}
      </FormSelect>
      <FormNumber path="lengthMm" label="Wire on it, in metres" />
      <FormText path="place" label="Where it is kept" />
    </SetupForm>
  );
}
