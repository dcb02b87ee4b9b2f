'use client';

import { useState } from 'react';
import { WireLine } from '@/components/ui/wire-line';
import { colourCode, colourName, isEarthColour, parseColour } from '@/lib/wire/colour';
import { FormNumber, FormText } from '../form/fields';
import { numberOf, textOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';

/** The form for one more kind of wire. */
export function AddWire({ action }: { action: SetupAction }) {
  const [colour, setColour] = useState('');
  return (
    <SetupForm
      action={action}
      read={(form) => ({
        gaugeAwg: numberOf(form, 'gaugeAwg'),
        conductor: textOf(form, 'conductor'),
        insulation: textOf(form, 'insulation'),
        colour: textOf(form, 'colour'),
        outsideDiameterMm: numberOf(form, 'outsideDiameterMm'),
      })}
      submit="Add"
      done="Added."
    >
      <h2 className="text-xl">Add a wire</h2>
      <FormNumber path="gaugeAwg" label="Gauge, AWG" inputMode="numeric" />
      <FormText
        path="colour"
        label="Colour"
        value={colour}
        onChange={(event) => setColour(event.target.value)}
        hint="IEC 60757 letters: BK BN RD OG YE GN BU VT GY WH PK GD TQ SR; two for two colours."
      />
      <ColourSaid typed={colour} />
      <FormText path="insulation" label="Insulation" hint="As on the spool, like ETFE." />
      <FormText path="conductor" label="Conductor" hint="Like silver-plated copper, solid." />
      <FormNumber path="outsideDiameterMm" label="Outside diameter, mm" hint="Over the insulation." />
    </SetupForm>
  );
}

/** Shows the colour as it is understood; green with yellow is kept for protective earth (IEC 60445). */
function ColourSaid({ typed }: { typed: string }) {
  const parsed = parseColour(typed);
  return (
    <div role="status" className="min-h-6">
      {parsed ? (
        <div className="grid grid-cols-[6rem_auto] items-center justify-start gap-3">
          <WireLine colour={colourCode(parsed)} ratio={1} />
          {colourName(parsed)}
        </div>
      ) : null}
      {parsed && isEarthColour(parsed) ? (
        <strong>Green-yellow is kept for protective earth. Do not use it for anything else.</strong>
      ) : null}
    </div>
  );
}
