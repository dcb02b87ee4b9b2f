'use client';

import type { BladeDto } from '@/lib/schemas/stock';
import { FormSelect, FormText } from '../form/fields';
import { textOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';
import { Opened, Row, Rows } from '../sides';

export interface BladeActions {
  fit: SetupAction;
  remove: SetupAction;
}

interface Bench {
  rigs: { id: string; name: string }[];
  actions: BladeActions;
  /** Whether the person may fit and remove. */
  mayChange: boolean;
}

/** The blades: where each is, and how often it closed. */
export function BladeRows({ blades, ...bench }: { blades: BladeDto[] } & Bench) {
  const bare = bench.rigs.filter((rig) => blades.every((blade) => blade.rigId !== rig.id));
  return (
    <Rows label="Blades" none="No blade yet.">
      {blades.map((blade) => (
        <Row key={blade.id} name={blade.label}>
          <p>
            {blade.model} · {placeOf(blade, bench.rigs)}
          </p>
          {bench.mayChange ? <ChangeBlade blade={blade} bare={bare} actions={bench.actions} /> : null}
        </Row>
      ))}
    </Rows>
  );
}

function placeOf(blade: BladeDto, rigs: Bench['rigs']): string {
  const rig = rigs.find(({ id }) => id === blade.rigId);
  return rig ? `in ${rig.name}, ${blade.cuts.toLocaleString('en')} cuts` : 'spare';
}

function ChangeBlade({
  blade,
  bare,
  actions,
}: {
  blade: BladeDto;
  bare: Bench['rigs'];
  actions: BladeActions;
}) {
  const bladeId = blade.id;
  if (blade.rigId) {
    return (
      <Opened title={`Take ${blade.label} out`}>
        <SetupForm
          action={actions.remove}
          read={(form) => ({ bladeId, reason: textOf(form, 'reason') })}
          submit="It is out"
          done="Noted."
          look="plain"
        >
          <p>
            Pull the rig’s plug first and keep it in your hand. A blade that was taken out does not go back
            in.
          </p>
          <FormText path="reason" label="Why" />
        </SetupForm>
      </Opened>
    );
  }
  return (
    <Opened title={`Fit ${blade.label}`}>
      <SetupForm
        action={actions.fit}
        read={(form) => ({ bladeId, rigId: textOf(form, 'rigId') })}
        submit="It is fitted"
        done="Noted."
        look="plain"
      >
        <FormSelect path="rigId" label="Rig" defaultValue="" hint="Rigs that have no blade.">
          <option value="">Pick a rig</option>
          {bare.map((rig) => (
            <option key={rig.id} value={rig.id}>
              {rig.name}
            </option>
          ))}
        </FormSelect>
      </SetupForm>
    </Opened>
  );
}
