'use client';

import { useQuery } from '@tanstack/react-query';
import { stateNow } from '@/components/live/freshness';
import { useLive } from '@/components/live/live-provider';
import { Notice } from '@/components/ui/notice';
import { useRights } from '@/components/shell/rights';
import { rigPageQuery } from '@/lib/queries/floor';
import type { RigPageDto } from '@/lib/schemas/floor';
import type { SpoolDto } from '@/lib/schemas/stock';
import { DropLot } from './drop-lot';
import { LoadSpool, type LoadAction } from './load-spool';
import { LotFacts } from './lot-facts';
import { Log } from './log';
import { Panels } from './panels';
import { RigHead } from './rig-head';
import { Signals } from './signals';
import { SilentPanel } from './silent-panel';
import { WorkHoldButton, WorkHoldPanel } from './work-hold';

interface RigViewProps {
  initial: RigPageDto;
  personId: string;
  spools: SpoolDto[];
  load: LoadAction;
}

/** The rig's page: the lot and the signals on the left, what is asked and offered on the right, the acts at the foot. */
export function RigView({ initial, personId, spools, load }: RigViewProps) {
  const { data: page } = useQuery({ ...rigPageQuery(initial.rig.id), initialData: initial });
  const { nowMs, lost } = useLive();
  const may = useRights();
  const { rig } = page;
  const state = lost ? 'silent' : stateNow(rig, nowMs);
  const quiet = !rig.run || rig.run.state === 'prepared';
  return (
    <div className="flex min-h-[calc(100vh-80px)] flex-col">
      <RigHead rig={rig} />
      {state === 'silent' ? <SilentPanel rig={rig} mayRelease={may('runs.release')} /> : null}
      {rig.workHold ? <WorkHoldPanel rig={rig} personId={personId} /> : null}
      {state === 'blocked' ? (
        <Notice title="The guard is open. Nothing moves until it is shut and you go on here." danger />
      ) : null}
      <div className="page grid grow grid-rows-[1fr_auto] gap-x-10 gap-y-6 pt-5 lg:grid-cols-[400px_1fr]">
        <div className="grid content-start gap-6">
          <LotFacts rig={rig} />
          <Signals rig={rig} />
          {may('rigs.load') && quiet ? <LoadSpool rig={rig} spools={spools} load={load} /> : null}
          {may('runs.operate') && rig.run?.state === 'prepared' ? <DropLot run={rig.run} /> : null}
          {may('rigs.hold') && !rig.workHold ? <WorkHoldButton rig={rig} /> : null}
        </div>
        <Panels page={page} state={state} />
      </div>
      <Log page={page} />
    </div>
  );
}
