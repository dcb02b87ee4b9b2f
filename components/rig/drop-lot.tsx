'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { TextField } from '@/components/ui/field';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RunDto } from '@/lib/schemas/run';

/** A lot that has not begun goes back to the queue, with the reason: another rig may take it. */
export function DropLot({ run }: { run: RunDto }) {
  const [reason, setReason] = useState('');
  const drop = useRunAction('dropRun');
  return (
    <details>
      <summary className="flex min-h-11 items-center underline">Send this lot back to the queue</summary>
      <div className="grid gap-3 py-2">
        <TextField
          label="Why"
          value={reason}
          onChange={(event) => setReason(event.target.value)}
          error={drop.problem?.fields[0]?.message}
        />
        <Button size="rig" disabled={drop.busy} onClick={() => void drop.act({ runId: run.id, reason })}>
          Send it back
        </Button>
        {drop.problem ? (
          <p role="alert" className="font-bold text-signal">
            {drop.problem.title}
          </p>
        ) : null}
      </div>
    </details>
  );
}
