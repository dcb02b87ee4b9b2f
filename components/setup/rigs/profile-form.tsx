'use client';

import type { ReactNode } from 'react';
import type { Profile } from '@/lib/program/profile';
import { FormCheck, FormNumber, FormSelect, FormText } from '../form/fields';
import { textOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';
import { GuardLimits } from './guard-limits';
import {
  CUT_AXIS_NUMBERS,
  FEED_NUMBERS,
  FITTED_FLAGS,
  HOLD_NUMBER,
  type NumberField,
} from './profile-fields';
import { readProfile } from './profile-form.read';

const BAUD_RATES = [57600, 115200, 230400, 250000, 500000];

/** A rig's numbers, section by section; saving makes the next version, the old ones stay. */
export function ProfileForm({
  rigId,
  profile,
  action,
}: {
  rigId: string;
  profile: Profile | null;
  action: SetupAction;
}) {
  return (
    <SetupForm
      action={action}
      read={(form) => ({ rigId, profile: readProfile(form), reason: textOf(form, 'reason') })}
      submit="Publish the profile"
      done="Published. The agent reads it now."
    >
      <Section title="Cut axis">
        <FormSelect path="profile.cutAxis.axis" label="Axis" defaultValue={profile?.cutAxis.axis ?? 'Z'}>
          <AxisOptions />
        </FormSelect>
        <FormSelect
          path="profile.cutAxis.homing"
          label="Homing"
          defaultValue={profile?.cutAxis.homing ?? 'endstop'}
        >
          <option value="endstop">by its end stop</option>
          <option value="declared">by hand, then declared</option>
        </FormSelect>
        <Numbers fields={CUT_AXIS_NUMBERS} profile={profile} />
      </Section>
      <Section title="Feed">
        <Numbers fields={FEED_NUMBERS} profile={profile} />
      </Section>
      <Section title="Register and pause">
        <FormSelect
          path="profile.registerAxis"
          label="Register axis"
          defaultValue={profile ? (profile.registerAxis ?? '') : 'Y'}
          hint="An axis that never moves and keeps the count. Without one, a person settles the open piece."
        >
          <option value="">none is free</option>
          <AxisOptions />
        </FormSelect>
        <Numbers fields={[HOLD_NUMBER]} profile={profile} />
      </Section>
      <Fitted profile={profile} />
      <Serial profile={profile} />
      <FormText path="reason" label="Why this version" hint="Read later by whoever looks for a cause." />
    </SetupForm>
  );
}

function Section({ title, children }: { title: string; children: ReactNode }) {
  return (
    <fieldset className="border-t border-line pt-3">
      <legend className="name pr-3 text-lg">{title}</legend>
      <div className="grid gap-4 sm:grid-cols-2 xl:grid-cols-3">{children}</div>
    </fieldset>
  );
}

function AxisOptions() {
  return (
    <>
      {['X', 'Y', 'Z'].map((axis) => (
        <option key={axis}>{axis}</option>
      ))}
    </>
  );
}

function Numbers({ fields, profile }: { fields: readonly NumberField[]; profile: Profile | null }) {
  return (
    <>
      {fields.map(({ path, label, hint }) => (
        <FormNumber
          key={path}
          path={`profile.${path}`}
          label={label}
          hint={hint}
          defaultValue={profile ? valueAt(profile, path) : ''}
        />
      ))}
    </>
  );
}

function valueAt(profile: Profile, path: string): string {
  const value = path
    .split('.')
    .reduce<unknown>((inner, key) => (inner as Record<string, unknown> | undefined)?.[key], profile);
  return typeof value === 'number' ? String(value) : '';
}

function Fitted({ profile }: { profile: Profile | null }) {
  const guard = profile?.fitted.guardSwitch ?? null;
  return (
    <Section title="What is fitted">
      <FormSelect
        path="profile.fitted.guardSwitch.closedReads"
        label="Guard switch"
        defaultValue={guard?.closedReads ?? ''}
        hint="What M119 answers while the guard is shut."
      >
        <option value="">not fitted</option>
        <option value="TRIGGERED">shut reads TRIGGERED</option>
        <option value="open">shut reads open</option>
      </FormSelect>
      <FormText
        path="profile.fitted.guardSwitch.endstop"
        label="Guard’s end stop"
        defaultValue={guard?.endstop ?? ''}
        hint="As M119 names it, like x_max."
      />
      {FITTED_FLAGS.map(({ flag, label, hint }) => (
        <FormCheck
          key={flag}
          path={`profile.fitted.${flag}`}
          label={label}
          hint={hint}
          defaultChecked={profile?.fitted[flag] ?? false}
        />
      ))}
      {profile ? <GuardLimits profile={profile} /> : null}
    </Section>
  );
}

function Serial({ profile }: { profile: Profile | null }) {
  return (
    <Section title="Serial port">
      <FormSelect
        path="profile.serial.baudRate"
        label="Baud rate"
        defaultValue={profile?.serial.baudRate ?? 115200}
      >
        {BAUD_RATES.map((rate) => (
          <option key={rate}>{rate}</option>
        ))}
      </FormSelect>
      <FormCheck
        path="profile.serial.resetsOnOpen"
        label="The board resets when the port opens"
        hint="Small boards do, native-USB boards do not."
        defaultChecked={profile?.serial.resetsOnOpen ?? true}
      />
      <FormCheck
        path="profile.serial.unnumbered"
        label="Send lines without number and checksum"
        hint="Only for firmware that refuses them. A damaged line is then carried out as it arrives, and a lost answer holds the run."
        defaultChecked={profile?.serial.unnumbered ?? false}
      />
    </Section>
  );
}
