'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RunDto } from '@/lib/schemas/run';

/** Ends a run for good; asks once more, because the rest of the lot goes back to the queue. */
export function StopButton({ run }: { run: RunDto }) {
  const [asking, setAsking] = useState(false);
  const stop = useRunAction('stop');
  if (!asking) {
    return (
      <Button look="signal" size="rig" onClick={() => setAsking(true)}>
        Stop this run
      </Button>
    );
  }
  return (
    <div role="group" aria-label="Stop this run" className="flex flex-wrap items-center gap-3">
      <p className="max-w-64">
        It ends after {run.cut} of {run.pieces}; the rest goes back to the queue. This is not an emergency
        stop.
      </p>
      <Button look="signal" size="rig" disabled={stop.busy} onClick={() => void stop.act({ runId: run.id })}>
        Stop now
      </Button>
      <Button size="rig" onClick={() => setAsking(false)}>
        Keep it
      </Button>
      {stop.problem ? (
        <p role="alert" className="font-bold text-signal">
          {stop.problem.title}
        </p>
      ) : null}
    </div>
  );
}
