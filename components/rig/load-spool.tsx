'use client';

import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { SelectField } from '@/components/ui/field';
import type { ActionResult } from '@/lib/schemas/action-result';
import type { RigDto } from '@/lib/schemas/floor';
import type { SpoolDto } from '@/lib/schemas/stock';
import { wireName } from '@/lib/wire/name';
import { metres } from './words';

export type LoadAction = (input: unknown) => Promise<ActionResult<unknown>>;

/** Says which spool hangs on the rig; lots of that wire then come by themselves. */
export function LoadSpool({ rig, spools, load }: { rig: RigDto; spools: SpoolDto[]; load: LoadAction }) {
  const client = useQueryClient();
  const [spoolId, setSpoolId] = useState(rig.spool?.id ?? '');
  const [busy, setBusy] = useState(false);
  const [problem, setProblem] = useState('');
  const free = spools.filter((spool) => spool.rigName === null || spool.id === rig.spool?.id);
  async function submit() {
    setBusy(true);
    const result = await load({ rigId: rig.id, spoolId: spoolId === '' ? null : spoolId });
    setProblem(result.ok ? '' : result.title);
    setBusy(false);
    await client.invalidateQueries({ queryKey: ['rig'] });
  }
  return (
    <section aria-labelledby="load" className="grid gap-2">
      <h2 id="load" className="text-xl">
        Load a spool
      </h2>
      <SelectField
        label="The spool on this rig"
        value={spoolId}
        onChange={(event) => setSpoolId(event.target.value)}
        error={problem || undefined}
        className="min-h-16"
      >
        <option value="">none</option>
        {free.map((spool) => (
          <option key={spool.id} value={spool.id}>
            {spool.label}, {wireName(spool.wire)}, {metres(spool.leftMm)} left
            {spool.place ? `, ${spool.place}` : ''}
          </option>
        ))}
      </SelectField>
      <Button size="rig" disabled={busy || spoolId === (rig.spool?.id ?? '')} onClick={() => void submit()}>
        It hangs and is threaded
      </Button>
    </section>
  );
}
