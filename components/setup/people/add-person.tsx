'use client';

import { FormChoices, FormText } from '../form/fields';
import { textOf, tickedOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';
import { ROLE_CHOICES } from './role-choices';

/** The form for one more person. */
export function AddPerson({ action }: { action: SetupAction }) {
  return (
    <SetupForm
      action={action}
      read={(form) => ({
        name: textOf(form, 'name'),
        email: textOf(form, 'email'),
        roles: tickedOf(form, 'roles'),
        password: textOf(form, 'password'),
      })}
      submit="Add"
      done="Added. They were written to; tell them the password yourself."
      clears
    >
      <h2 className="text-xl">Add a person</h2>
      <FormText path="name" label="Name" />
      <FormText path="email" label="E-mail" type="email" />
      <FormChoices path="roles" legend="Roles" choices={ROLE_CHOICES} />
      <FormText
        path="password"
        label="First password"
        type="password"
        autoComplete="new-password"
        hint="At least 10 characters. It is not sent by e-mail."
      />
    </SetupForm>
  );
}
