'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { TextField } from '@/components/ui/field';
import { Notice } from '@/components/ui/notice';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RigDto } from '@/lib/schemas/floor';

/** A rig that is not heard: go and look; a named person may take its lot away, with what that means. */
export function SilentPanel({ rig, mayRelease }: { rig: RigDto; mayRelease: boolean }) {
  const [reason, setReason] = useState('');
  const release = useRunAction('releaseLot');
  const { run } = rig;
  return (
    <Notice title={`${rig.name} is not heard. It may still be moving.`} danger>
      <p>Go and look. Use the hardware stop or pull the plug before you reach in.</p>
      {rig.portProblem ? <p>{rig.portProblem}</p> : null}
      {run && mayRelease ? (
        <details className="my-2">
          <summary className="flex min-h-11 items-center underline">Take its lot away</summary>
          <div className="grid max-w-md gap-3 py-2">
            <p>
              The {run.cut} pieces it reported stay with it for the bag; the rest goes to another rig.
              Whatever it still cuts is surplus and raises an alarm.
            </p>
            <TextField
              label="Why"
              value={reason}
              onChange={(event) => setReason(event.target.value)}
              error={release.problem?.fields[0]?.message}
            />
            <Button
              look="signal"
              size="rig"
              disabled={release.busy}
              onClick={() => void release.act({ runId: run.id, reason })}
            >
              Take the lot away
            </Button>
            {release.problem ? (
              <p role="alert" className="font-bold text-signal">
                {release.problem.title}
              </p>
            ) : null}
          </div>
        </details>
      ) : null}
    </Notice>
  );
}
