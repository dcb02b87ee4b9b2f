'use client';

import { WireLine } from '@/components/ui/wire-line';
import type { SpoolDto } from '@/lib/schemas/stock';
import { wireName } from '@/lib/wire/name';
import { SetupForm, type SetupAction } from '../form/setup-form';
import { Row, Rows } from '../sides';

/** `61.0 m`: to the decimetre, as nobody measures a spool closer. */
function metres(lengthMm: number): string {
  return `${(lengthMm / 1000).toFixed(1)} m`;
}

/** The spools in stock, each with its wire lying along what was on it. */
export function SpoolRows({ spools, end }: { spools: SpoolDto[]; end: SetupAction }) {
  return (
    <Rows label="Spools" none="No spool yet. A rig cuts from a spool that is known here.">
      {spools.map((spool) => (
        <Row key={spool.id} name={spool.label} act={<EndSpool spool={spool} end={end} />}>
          <div className="flex flex-wrap justify-between gap-x-4">
            <span className="font-mono text-[0.95em]">{wireName(spool.wire)}</span>
            <span className="figure">
              {metres(spool.leftMm)} of {metres(spool.lengthMm)} left
            </span>
          </div>
          <WireLine colour={spool.wire.colour} ratio={spool.leftMm / spool.lengthMm} />
          <p className="text-soft">
            {spool.rigName ? `on ${spool.rigName}` : spool.place || 'no place given'}
          </p>
        </Row>
      ))}
    </Rows>
  );
}

function EndSpool({ spool, end }: { spool: SpoolDto; end: SetupAction }) {
  if (spool.rigName) return null;
  return (
    <SetupForm
      action={end}
      read={() => ({ spoolId: spool.id })}
      submit={`End ${spool.label}`}
      done="Ended."
      look="plain"
    />
  );
}
