'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Strip } from '@/components/floor/strip';
import { stateNow } from '@/components/live/freshness';
import { useLive } from '@/components/live/live-provider';
import { wallClock } from '@/components/live/time';
import { useRunAction } from '@/components/runs/use-run-action';
import { MISFEED_CAUSES } from '@/lib/fleet/run';
import type { RigDto } from '@/lib/schemas/floor';
import type { RunDto } from '@/lib/schemas/run';
import { ActBar } from './act-bar';
import { StopButton } from './stop-button';

/** The count, large enough for arm's length, and the strip. */
export function RunStrip({ rig, run }: { rig: RigDto; run: RunDto }) {
  const { nowMs, timeZone, lost } = useLive();
  const stale = lost || stateNow(rig, nowMs) === 'silent';
  return (
    <section aria-label="The run" className="border-b border-line py-4">
      <p className={`flex items-baseline gap-3 ${stale ? 'text-soft' : ''}`} data-count={run.cut}>
        <span className="figure text-7xl">{run.cut}</span>
        <span className="text-xl">
          of {run.pieces} pieces cut{stale ? ' when it was last heard' : ''}
          {!stale && run.state === 'cutting' && run.expectedEndAt ? (
            <span className="text-soft"> · done about {wallClock(run.expectedEndAt, timeZone, nowMs)}</span>
          ) : null}
        </span>
      </p>
      <Strip
        colour={rig.spool?.wire.colour ?? run.wire.colour}
        spoolFill={rig.spool ? rig.spool.leftMm / rig.spool.lengthMm : 0}
        pieces={run.pieces}
        cut={run.cut}
        tray={run.bagged}
        stale={stale}
      />
      <p className="mt-2 text-soft">
        In the tray for the bag: {run.bagged} = {run.cut} cut − {run.scrapped} scrap − {run.sampled} samples −{' '}
        {run.doubted} in doubt
      </p>
    </section>
  );
}

/** One tap for what went wrong: the run is held with that cause. */
export function MisfeedButton({ run }: { run: RunDto }) {
  const [asking, setAsking] = useState(false);
  const hold = useRunAction('hold');
  if (!asking) {
    return (
      <Button size="rig" onClick={() => setAsking(true)}>
        Misfeed
      </Button>
    );
  }
  return (
    <div role="group" aria-label="What went wrong" className="flex flex-wrap items-center gap-2">
      {MISFEED_CAUSES.map((cause) => (
        <Button
          key={cause}
          size="rig"
          disabled={hold.busy}
          onClick={() => void hold.act({ runId: run.id, cause })}
        >
          {cause}
        </Button>
      ))}
      <Button size="rig" look="dashed" onClick={() => setAsking(false)}>
        nothing
      </Button>
      {hold.problem ? (
        <p role="alert" className="font-bold text-signal">
          {hold.problem.title}
        </p>
      ) : null}
    </div>
  );
}

/** While it cuts: pause, misfeed, stop. */
export function CuttingBar({ run, mayOperate }: { run: RunDto; mayOperate: boolean }) {
  const pause = useRunAction('pause');
  return (
    <ActBar problem={pause.problem}>
      <Button look="ink" size="rig" disabled={pause.busy} onClick={() => void pause.act({ runId: run.id })}>
        {pause.busy ? 'Finishing the piece' : 'Pause'}
      </Button>
      {mayOperate ? <MisfeedButton run={run} /> : null}
      <StopButton run={run} />
    </ActBar>
  );
}
