'use client';

import type { PersonDto } from '@/lib/schemas/people';
import { FormChoices, FormText } from '../form/fields';
import { textOf, tickedOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';
import { Opened, Row } from '../sides';
import { ROLE_CHOICES } from './role-choices';

export interface PersonActions {
  changeRoles: SetupAction;
  setPassword: SetupAction;
  disable: SetupAction;
  enable: SetupAction;
}

/** One person and what an owner can change about them. */
export function PersonRow({ person, actions }: { person: PersonDto; actions: PersonActions }) {
  const personId = person.id;
  return (
    <Row name={person.name}>
      <p>
        {person.disabledAt ? <strong>Disabled. </strong> : null}
        {person.roles.join(', ')}
      </p>
      <p className="text-soft">{person.email}</p>
      <Opened title={`Change ${person.name}`}>
        <SetupForm
          key={person.roles.join()}
          action={actions.changeRoles}
          read={(form) => ({ personId, roles: tickedOf(form, 'roles') })}
          submit="Save roles"
          done="Saved."
          look="plain"
        >
          <FormChoices path="roles" legend="Roles" choices={ROLE_CHOICES} chosen={person.roles} />
        </SetupForm>
        <SetupForm
          action={actions.setPassword}
          read={(form) => ({ personId, password: textOf(form, 'password') })}
          submit="Set password"
          done="Set. They are signed out everywhere."
          look="plain"
          clears
        >
          <FormText path="password" label="New password" type="password" autoComplete="new-password" />
        </SetupForm>
        <Access person={person} actions={actions} />
      </Opened>
    </Row>
  );
}

function Access({ person, actions }: { person: PersonDto; actions: PersonActions }) {
  const read = () => ({ personId: person.id });
  if (person.disabledAt) {
    return (
      <SetupForm action={actions.enable} read={read} submit="Let them in again" done="Done." look="plain" />
    );
  }
  return (
    <SetupForm action={actions.disable} read={read} submit="Disable" done="Disabled." look="signal">
      <p>Disabling signs them out everywhere within seconds and takes back what they asked of rigs.</p>
    </SetupForm>
  );
}
