'use client';

import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { useLive } from '@/components/live/live-provider';
import { wallClock } from '@/components/live/time';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RigDto } from '@/lib/schemas/floor';

/** One tap: "I am working on this rig". Nothing moves until that same person ends it. */
export function WorkHoldButton({ rig }: { rig: RigDto }) {
  const begin = useRunAction('beginWorkHold');
  return (
    <div>
      <Button size="rig" disabled={begin.busy} onClick={() => void begin.act({ rigId: rig.id })}>
        I work on this rig
      </Button>
      {begin.problem ? (
        <p role="alert" className="font-bold text-signal">
          {begin.problem.title}
        </p>
      ) : null}
    </div>
  );
}

/** While somebody works on it: who, whether it stands still, and the end for that person alone. */
export function WorkHoldPanel({ rig, personId }: { rig: RigDto; personId: string }) {
  const { nowMs, timeZone } = useLive();
  const end = useRunAction('endWorkHold');
  const { workHold } = rig;
  if (!workHold) return null;
  const own = workHold.personId === personId;
  return (
    <Notice
      title={`${own ? 'You work' : `${workHold.personName} works`} on ${rig.name} since ${wallClock(workHold.beganAt, timeZone, nowMs)}`}
    >
      <p>
        {workHold.standstillAt
          ? 'The agent says that the rig stands still. Pull the plug and keep it in your hand before you reach in; follow your workshop’s lockout steps.'
          : 'Wait: it is not yet known that the rig stands still. Do not reach in.'}
      </p>
      {own ? (
        <div className="py-3">
          <Button look="ink" size="rig" disabled={end.busy} onClick={() => void end.act({ rigId: rig.id })}>
            My hands and tools are out, end it
          </Button>
        </div>
      ) : (
        <p className="text-soft">Only they can end this, at the rig.</p>
      )}
      {end.problem ? (
        <p role="alert" className="font-bold text-signal">
          {end.problem.title}
        </p>
      ) : null}
    </Notice>
  );
}
