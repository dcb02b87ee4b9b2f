'use client';

import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { CheckField } from '@/components/ui/field';
import { useLive } from '@/components/live/live-provider';
import { wallClock } from '@/components/live/time';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RigPageDto } from '@/lib/schemas/floor';

/** The short physical list; the first point says which bag left the tray last. */
function ShortList({ page }: { page: RigPageDto }) {
  const { nowMs, timeZone } = useLive();
  const { lastBag } = page;
  return (
    <ol>
      {page.notes?.points.map((point, index) => (
        <li key={point} className="flex gap-5 border-b border-line py-2.5">
          <span aria-hidden className="figure w-6 text-center text-2xl">
            {index + 1}
          </span>
          <span className="self-center">
            {point}
            {index === 0 && lastBag ? (
              <span className="block text-sm text-soft">
                The last bag, {lastBag.batchName} lot {lastBag.lotNumber}, was confirmed at{' '}
                {wallClock(lastBag.clearedAt, timeZone, nowMs)}.
              </span>
            ) : null}
          </span>
        </li>
      ))}
    </ol>
  );
}

/** The full text: open when it must be read, else folded away with when it was read. */
function FullText({ page }: { page: RigPageDto }) {
  const { nowMs, timeZone } = useLive();
  if (!page.notes) return null;
  const read = page.fullReadAt
    ? `read by you at ${wallClock(page.fullReadAt, timeZone, nowMs)}`
    : 'to be read now';
  return (
    <details open={page.fullReadAt === null} className="my-3">
      <summary className="flex min-h-11 items-center text-soft underline">
        Full interlock notes, version {page.notes.version}, {read}
      </summary>
      <div className="max-w-prose border-l-2 border-ink pl-4 whitespace-pre-line">{page.notes.fullText}</div>
    </details>
  );
}

/** "Before anything moves": the notes, and the confirmation that a run needs before it starts. */
export function NotesPanel({ page }: { page: RigPageDto }) {
  const [readFull, setReadFull] = useState(false);
  const acknowledge = useRunAction('acknowledgeNotes');
  const { notes, rig } = page;
  const run = rig.run;
  if (!notes || !run) return null;
  const fullOpen = page.fullReadAt === null;
  return (
    <section aria-labelledby="notes">
      <h2 id="notes" className="border-b border-line pb-2 text-xl">
        Before anything moves
      </h2>
      <ShortList page={page} />
      <FullText page={page} />
      {page.acknowledged ? (
        <p className="font-bold">You have confirmed these notes for this run.</p>
      ) : (
        <div className="grid gap-2">
          {fullOpen ? (
            <CheckField
              label={`I have read the full notes, version ${notes.version}.`}
              checked={readFull}
              onChange={(event) => setReadFull(event.target.checked)}
            />
          ) : null}
          <Button
            size="rig"
            look="ink"
            disabled={acknowledge.busy || (fullOpen && !readFull)}
            onClick={() =>
              void acknowledge.act({ runId: run.id, notesVersion: notes.version, full: fullOpen })
            }
          >
            I have checked every point at the rig
          </Button>
          {acknowledge.problem ? (
            <p role="alert" className="font-bold text-signal">
              {acknowledge.problem.title}
            </p>
          ) : null}
        </div>
      )}
    </section>
  );
}
