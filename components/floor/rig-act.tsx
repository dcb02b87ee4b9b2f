'use client';

import type { ReactNode } from 'react';
import { Button, LinkButton } from '@/components/ui/button';
import { useRights } from '@/components/shell/rights';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RigState } from '@/lib/fleet/rig-state';
import { routes } from '@/lib/routes';
import type { RigDto } from '@/lib/schemas/floor';

/** What may be done with a rig from the floor: pause it, or open its page where a question waits. */
export function RigAct({ rig, state, fallback }: { rig: RigDto; state: RigState; fallback: ReactNode }) {
  const may = useRights();
  const pause = useRunAction('pause');
  const { run } = rig;
  if (state === 'work hold') {
    return (
      <LinkButton href={routes.rig(rig.id)} look="dashed" size="rig" className="w-full text-center">
        Only they can end this
      </LinkButton>
    );
  }
  if (state === 'cutting' && run && may('runs.stop')) {
    return (
      <div>
        <Button
          size="rig"
          className="w-full"
          disabled={pause.busy}
          onClick={() => void pause.act({ runId: run.id })}
        >
          {pause.busy ? 'Pausing' : 'Pause'}
          <span className="sr-only"> {rig.name}</span>
        </Button>
        {pause.problem ? (
          <p role="alert" className="text-sm font-bold text-signal">
            {pause.problem.title}
          </p>
        ) : null}
      </div>
    );
  }
  const asks = state === 'held' || state === 'blocked' || state === 'tray full' || state === 'silent';
  if (!asks) return fallback;
  const measure = state === 'held' && run?.holdReason === 'first-pieces';
  return (
    <LinkButton href={routes.rig(rig.id)} look="ink" size="rig" className="w-full">
      {measure ? 'Enter lengths' : state === 'tray full' ? 'Empty the tray' : `Open ${rig.name}`}
    </LinkButton>
  );
}
