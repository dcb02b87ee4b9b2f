'use client';

import type { RigSetupDto } from '@/lib/schemas/setup-rigs';
import type { BladeDto, SpoolDto } from '@/lib/schemas/stock';
import { wireName } from '@/lib/wire/name';
import { FormSelect, FormText } from '../form/fields';
import { textOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';

interface Part {
  rig: RigSetupDto;
}

/** Says which spool hangs on the rig. */
export function SpoolPart({ rig, spools, action }: Part & { spools: SpoolDto[]; action: SetupAction }) {
  const free = spools.filter((spool) => spool.rigName === null || spool.id === rig.spool?.id);
  return (
    <SetupForm
      key={rig.spool?.id}
      action={action}
      read={(form) => ({ rigId: rig.id, spoolId: textOf(form, 'spoolId') || null })}
      submit="It hangs and is threaded"
      done="Noted."
      look="plain"
    >
      <FormSelect path="spoolId" label="The spool on this rig" defaultValue={rig.spool?.id ?? ''}>
        <option value="">none</option>
        {free.map((spool) => (
          <option key={spool.id} value={spool.id}>
            {spool.label}, {wireName(spool.wire)}
          </option>
        ))}
      </FormSelect>
    </SetupForm>
  );
}

/** Fits a spare blade, or says which one is in. */
export function BladePart({ rig, blades, action }: Part & { blades: BladeDto[]; action: SetupAction }) {
  if (rig.blade) {
    return (
      <p>
        {rig.blade.label}, {rig.blade.model}, {rig.blade.cuts.toLocaleString('en')} cuts.
      </p>
    );
  }
  return (
    <SetupForm
      action={action}
      read={(form) => ({ rigId: rig.id, bladeId: textOf(form, 'bladeId') })}
      submit="It is fitted"
      done="Noted."
      look="plain"
    >
      <FormSelect path="bladeId" label="The blade in this rig" defaultValue="">
        <option value="">Pick a spare blade</option>
        {blades
          .filter((blade) => blade.rigId === null)
          .map((blade) => (
            <option key={blade.id} value={blade.id}>
              {blade.label}, {blade.model}
            </option>
          ))}
      </FormSelect>
    </SetupForm>
  );
}

/** Takes the rig out of service, or brings it back. */
export function ServicePart({
  rig,
  takeOut,
  bringBack,
}: Part & { takeOut: SetupAction; bringBack: SetupAction }) {
  if (rig.outOfServiceReason) {
    return (
      <SetupForm
        action={bringBack}
        read={() => ({ rigId: rig.id })}
        submit="Bring it back into service"
        done="It gets lots again."
        look="plain"
      >
        <p>Out of service: {rig.outOfServiceReason}</p>
      </SetupForm>
    );
  }
  return (
    <SetupForm
      action={takeOut}
      read={(form) => ({ rigId: rig.id, reason: textOf(form, 'reason') })}
      submit="Take it out of service"
      done="It gets no lots."
      look="plain"
    >
      <FormText path="reason" label="Why" hint="Shown on the floor." />
    </SetupForm>
  );
}
