'use client';

import { FormText } from '../form/fields';
import { textOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';

/** The form for one more spare blade. */
export function AddBlade({ action }: { action: SetupAction }) {
  return (
    <SetupForm
      action={action}
      read={(form) => ({ label: textOf(form, 'label'), model: textOf(form, 'model') })}
      submit="Add"
      done="Added."
      clears
    >
      <h2 className="text-xl">Add a blade</h2>
      <FormText path="label" label="Label" hint="What is scratched into its handle, like B-0111." />
      <FormText path="model" label="Model" hint="Which pliers or cutter it is." />
    </SetupForm>
  );
}
