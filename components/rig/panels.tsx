'use client';

import Link from 'next/link';
import { Notice } from '@/components/ui/notice';
import { useRights } from '@/components/shell/rights';
import { HOLD_WORDS } from '@/lib/fleet/words';
import type { RigState } from '@/lib/fleet/rig-state';
import { routes } from '@/lib/routes';
import type { RigPageDto } from '@/lib/schemas/floor';
import type { RunDto } from '@/lib/schemas/run';
import { CuttingBar, MisfeedButton, RunStrip } from './cutting-panel';
import { DoubtPanel } from './doubt-panel';
import { MeasurePanel } from './measure-panel';
import { MoveBar } from './move-bar';
import { NotesPanel } from './notes-panel';
import { StopButton } from './stop-button';
import { ActBar } from './act-bar';
import { Then } from './then';
import { TrayPanel } from './tray-panel';

/** A lot that is about to start. */
function StartPanel({ page, run }: { page: RigPageDto; run: RunDto }) {
  const first = Math.min(run.firstPieces, run.pieces);
  const waitsFor = !run.programHeld
    ? 'The agent does not hold the program yet.'
    : page.acknowledged
      ? null
      : 'Confirm the notes first.';
  return (
    <>
      <div className="grow">
        <NotesPanel page={page} />
        <Then run={run} />
      </div>
      <MoveBar
        page={page}
        verb="start"
        label={first > 0 ? `Trim and cut ${first}` : 'Trim and start'}
        waitsFor={waitsFor}
      />
    </>
  );
}

/** What happened and what to bring, but for first pieces, which ask for themselves. */
function HoldNotice({ run }: { run: RunDto }) {
  if (!run.holdReason || run.holdReason === 'first-pieces') return null;
  const words = HOLD_WORDS[run.holdReason];
  const danger = run.holdReason === 'guard-open' || run.holdReason === 'heater-warm';
  return (
    <Notice title={`Held: ${words.happened}`} danger={danger}>
      <p>{words.bring}</p>
      {run.holdNote ? <p className="text-soft">{run.holdNote}</p> : null}
    </Notice>
  );
}

/** A held run: what it asks, and the way on. */
function HeldPanel({ page, run }: { page: RigPageDto; run: RunDto }) {
  const doubt = run.doubtPiece !== null;
  if (!doubt && run.piecesToMeasure.length > 0) {
    return (
      <MeasurePanel key={run.piecesToMeasure.join()} run={run}>
        <HoldNotice run={run} />
      </MeasurePanel>
    );
  }
  return (
    <>
      <div className="grid grow content-start gap-4">
        <HoldNotice run={run} />
        {doubt ? <DoubtPanel run={run} /> : null}
        {page.acknowledged ? null : <NotesPanel page={page} />}
        <RunStrip rig={page.rig} run={run} />
      </div>
      {doubt ? (
        <ActBar>
          <p>Settle the piece in doubt before it goes on.</p>
          <StopButton run={run} />
        </ActBar>
      ) : (
        <GoOnBar page={page} run={run} />
      )}
    </>
  );
}

function GoOnBar({ page, run }: { page: RigPageDto; run: RunDto }) {
  return (
    <MoveBar
      page={page}
      verb="goOn"
      label={`Go on, ${run.pieces - run.cut} to cut`}
      waitsFor={page.acknowledged ? null : 'Confirm the notes first.'}
    >
      {run.state === 'paused' ? <MisfeedButton run={run} /> : null}
    </MoveBar>
  );
}

function PausedPanel({ page, run }: { page: RigPageDto; run: RunDto }) {
  return (
    <>
      <div className="grow">
        {page.acknowledged ? null : <NotesPanel page={page} />}
        <RunStrip rig={page.rig} run={run} />
        <p className="py-3">
          Paused. It waits at standby; if it waits long, the motors let go and it homes and trims before it
          goes on.
        </p>
      </div>
      <GoOnBar page={page} run={run} />
    </>
  );
}

function NoRun({ page }: { page: RigPageDto }) {
  const { spool } = page.rig;
  return (
    <div>
      <h2 className="mb-2 text-xl">Nothing to cut here</h2>
      <p className="max-w-prose">
        {spool
          ? 'The next lot that needs this wire comes here by itself. Load another spool if other wire is waited for.'
          : 'Load a spool first: lots go only to rigs that have their wire loaded.'}
      </p>
      {page.lastBag ? (
        <p className="mt-2 text-soft">
          The last bag was {page.lastBag.batchName}, lot {page.lastBag.lotNumber}.
        </p>
      ) : null}
      <p className="mt-2">
        <Link href={routes.batches()} className="underline">
          See what waits
        </Link>
      </p>
    </div>
  );
}

/** What the rig's page asks for and offers, by its state and run. */
export function Panels({ page, state }: { page: RigPageDto; state: RigState }) {
  const may = useRights();
  const run = page.rig.run;
  if (!run) return <NoRun page={page} />;
  const operate = may('runs.operate');
  switch (run.state) {
    case 'prepared':
      return operate ? <StartPanel page={page} run={run} /> : <NoRun page={page} />;
    case 'cutting':
      return (
        <>
          <div className="grow">
            <RunStrip rig={page.rig} run={run} />
          </div>
          <CuttingBar run={run} mayOperate={operate} />
        </>
      );
    case 'paused':
      return operate ? <PausedPanel page={page} run={run} /> : <RunStrip rig={page.rig} run={run} />;
    case 'held':
      return operate ? <HeldPanel page={page} run={run} /> : <RunStrip rig={page.rig} run={run} />;
    case 'ended':
    case 'released':
      return operate && state !== 'work hold' ? (
        <TrayPanel run={run} />
      ) : (
        <RunStrip rig={page.rig} run={run} />
      );
    default:
      return <NoRun page={page} />;
  }
}
