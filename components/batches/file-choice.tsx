'use client';

import { type DragEvent, useId, useState } from 'react';
import { Button } from '@/components/ui/button';

/** The example that comes with Ellwand: an invented board. */
export const EXAMPLE = { path: '/examples/larch-counter.csv', name: 'larch-counter.csv' };

interface FileChoiceProps {
  busy: boolean;
  onFile: (file: File) => void;
  onExample: () => void;
}

/** Where a cut list is dropped or chosen, and where the example is offered. */
export function FileChoice({ busy, onFile, onExample }: FileChoiceProps) {
  const id = useId();
  const [over, setOver] = useState(false);

  function drop(event: DragEvent) {
    event.preventDefault();
    setOver(false);
    const [file] = event.dataTransfer.files;
    if (file) onFile(file);
  }

  return (
    <div className="grid gap-4">
      <div
        onDragOver={(event) => {
          event.preventDefault();
          setOver(true);
        }}
        onDragLeave={() => setOver(false)}
        onDrop={drop}
        className={`grid justify-items-start gap-3 border border-dashed border-ink p-6 ${over ? 'hatch-soft' : 'bg-sheet'}`}
      >
        <label htmlFor={id} className="name text-lg">
          Drop a cut list here, or choose one
        </label>
        <input
          id={id}
          type="file"
          accept=".csv,.tsv,.txt,text/csv,text/plain"
          disabled={busy}
          onChange={(event) => {
            const [file] = event.target.files ?? [];
            // The same file chosen again after a correction must be read again.
            event.target.value = '';
            if (file) onFile(file);
          }}
          className="min-h-11 max-w-full file:mr-3 file:min-h-11 file:rounded-[2px] file:border file:border-ink file:bg-sheet file:px-4 file:font-bold"
        />
        <p className="text-soft">
          CSV, at most 1 MB and 2,000 lines. Nothing is saved before you have seen it.
        </p>
      </div>
      <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
        <p>No list at hand? The Larch counter, an invented board, has 40 lines.</p>
        <Button disabled={busy} onClick={onExample}>
          Use the example
        </Button>
        <a
          href={EXAMPLE.path}
          download={EXAMPLE.name}
          className="inline-flex min-h-11 items-center underline"
        >
          Download it
        </a>
      </div>
    </div>
  );
}
