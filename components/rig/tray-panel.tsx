'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { Keypad } from '@/components/ui/keypad';
import { useRunAction } from '@/components/runs/use-run-action';
import { routes } from '@/lib/routes';
import type { RunDto } from '@/lib/schemas/run';
import { ActBar } from './act-bar';

const KINDS = [
  { kind: 'scrapped', label: 'More scrap', hint: 'short, nicked, crushed: thrown away' },
  { kind: 'sampled', label: 'Kept as samples', hint: 'kept back for measuring, not for the bag' },
] as const;
type Kind = (typeof KINDS)[number]['kind'];

/** The end of a run: what is thrown away or kept back, the bag's count, and the label. */
export function TrayPanel({ run }: { run: RunDto }) {
  const router = useRouter();
  const [counts, setCounts] = useState<Record<Kind, string>>({ scrapped: '', sampled: '' });
  const [at, setAt] = useState<Kind>('scrapped');
  const clear = useRunAction('clearTray');
  const enter = useRunAction('scrapPieces');
  const scrapped = Number(counts.scrapped);
  const sampled = Number(counts.sampled);
  const bagged = run.bagged - scrapped - sampled;
  const set = (kind: Kind) => (text: string) =>
    setCounts((old) => ({ ...old, [kind]: text.replace(/\D/g, '') }));
  const labelFirst = async () => {
    const found = [
      { kind: 'scrap', pieces: scrapped },
      { kind: 'sample', pieces: sampled },
    ].filter((entry) => entry.pieces > 0);
    for (const entry of found) {
      if (!(await enter.act({ runId: run.id, ...entry, reason: 'found at the tray' }))) return;
    }
    router.push(routes.label(run.id));
  };
  const confirm = async () => {
    if (!(await clear.act({ runId: run.id, scrapped, sampled }))) return;
    // No piece, no bag, no label.
    router.push(bagged > 0 ? routes.label(run.id) : routes.floor());
  };
  return (
    <>
      <section aria-labelledby="tray" className="py-1">
        <div>
          <h2 id="tray" className="text-xl">
            Empty the tray
          </h2>
          <p className="max-w-prose">
            Brush off-cuts away, do not wipe them by hand. Put the pieces into one bag, then say what does not
            go into it.
          </p>
          {KINDS.map(({ kind, label, hint }) => (
            <div key={kind} className="flex items-center gap-4 border-b border-line py-2">
              <label htmlFor={`tray-${kind}`} className="w-56">
                <strong>{label}</strong>
                <span className="block text-sm text-soft">{hint}</span>
              </label>
              <input
                id={`tray-${kind}`}
                inputMode="none"
                autoComplete="off"
                placeholder="0"
                value={counts[kind]}
                maxLength={4}
                onFocus={() => setAt(kind)}
                onChange={(event) => set(kind)(event.target.value)}
                className={`figure h-16 w-32 rounded-[2px] border bg-sheet px-4 text-2xl ${at === kind ? 'border-2 border-ink' : 'border-tick'}`}
              />
            </div>
          ))}
          <p className="mt-4 text-lg">
            The bag holds <strong className="figure text-4xl">{bagged}</strong> pieces
            <span className="block text-soft">
              {run.cut} cut − {run.scrapped + scrapped} scrap − {run.sampled + sampled} samples −{' '}
              {run.doubted} in doubt
            </span>
          </p>
          {run.pieces > bagged ? (
            <p>
              The lot asked for {run.pieces}: the missing {run.pieces - bagged} go back to the queue.
            </p>
          ) : null}
        </div>
      </section>
      <ActBar
        problem={clear.problem ?? enter.problem}
        above={<Keypad row label="Pieces" value={counts[at]} onChange={set(at)} lengthMax={4} />}
      >
        <p>The label shows this count. Confirm when the tray is empty and back in its slot.</p>
        <div className="flex flex-wrap gap-3">
          <Button size="rig" disabled={enter.busy || bagged <= 0} onClick={() => void labelFirst()}>
            Label first, then scan it
          </Button>
          <Button look="ink" size="rig" disabled={clear.busy || bagged < 0} onClick={() => void confirm()}>
            Tray is empty, make the label
          </Button>
        </div>
      </ActBar>
    </>
  );
}
