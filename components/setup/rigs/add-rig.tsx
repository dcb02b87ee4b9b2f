'use client';

import { useRouter } from 'next/navigation';
import { routes } from '@/lib/routes';
import { FormNumber, FormText } from '../form/fields';
import { numberOf, textOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';

/** The form for one more rig; leads on to its set-up. */
export function AddRig({ nextPlace, action }: { nextPlace: number; action: SetupAction<{ id: string }> }) {
  const router = useRouter();
  return (
    <SetupForm
      action={action}
      read={(form) => ({
        name: textOf(form, 'name'),
        bay: textOf(form, 'bay'),
        benchOrder: numberOf(form, 'benchOrder'),
      })}
      submit="Add and set up"
      done="Added."
      onDone={({ id }) => router.push(routes.setupRig(id))}
    >
      <h2 className="text-xl">Add a rig</h2>
      <FormText path="name" label="Name" hint="As it stands on the rig itself." />
      <FormText path="bay" label="Bay" hint="Where it stands, like bay 2." />
      <FormNumber
        path="benchOrder"
        label="Place along the bench"
        inputMode="numeric"
        defaultValue={nextPlace}
        hint="The floor shows the rigs in this order."
      />
    </SetupForm>
  );
}
