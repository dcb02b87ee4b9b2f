'use client';

import { FormText } from '@/components/setup/form/fields';
import { textOf } from '@/components/setup/form/read';
import { SetupForm, type SetupAction } from '@/components/setup/form/setup-form';
import type { PersonDto } from '@/lib/schemas/people';
import { trySignIn } from './sign-in';

/** The workshop's name and its first person; signs them in and leads to the set-up. */
export function FirstOwnerForm({
  action,
  setupUrl,
  signInUrl,
}: {
  action: SetupAction<PersonDto>;
  setupUrl: string;
  signInUrl: string;
}) {
  async function enter(form: FormData) {
    const refused = await trySignIn(textOf(form, 'email'), textOf(form, 'password'));
    window.location.assign(refused === null ? setupUrl : signInUrl);
  }
  return (
    <SetupForm
      action={action}
      read={(form) => ({
        workshopName: textOf(form, 'workshopName'),
        name: textOf(form, 'name'),
        email: textOf(form, 'email'),
        password: textOf(form, 'password'),
      })}
      submit="Begin"
      done="Made. You are signed in now."
      onDone={(_person, form) => void enter(form)}
      stays={false}
    >
      <FormText path="workshopName" label="Name of the workshop" />
      <FormText path="name" label="Your name" autoComplete="name" />
      <FormText path="email" label="Your e-mail" type="email" autoComplete="username" />
      <FormText
        path="password"
        label="Your password"
        type="password"
        autoComplete="new-password"
        hint="At least 10 characters."
      />
    </SetupForm>
  );
}
