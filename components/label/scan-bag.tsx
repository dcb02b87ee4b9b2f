'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { Button } from '@/components/ui/button';
import { TextField } from '@/components/ui/field';
import { useRunAction } from '@/components/runs/use-run-action';

/** Scanning the printed label, or pressing the button, confirms the bag; the rig is then ready for the next lot. */
export function ScanBag({ code }: { code: string }) {
  const router = useRouter();
  const [text, setText] = useState('');
  const confirm = useRunAction('confirmBag');
  const send = async (scanned: string) => {
    if (await confirm.act({ code: scanned })) router.refresh();
  };
  return (
    <form
      className="page flex flex-wrap items-end gap-4 border-b border-line py-4"
      onSubmit={(event) => {
        event.preventDefault();
        void send(text);
      }}
    >
      <div className="w-80">
        <TextField
          label="Scan the label"
          hint="A scanner types the code and presses Enter."
          autoFocus
          autoComplete="off"
          className="min-h-16 font-mono"
          value={text}
          onChange={(event) => setText(event.target.value)}
          error={confirm.problem?.title}
        />
      </div>
      <Button type="submit" size="rig" disabled={confirm.busy || text.trim() === ''}>
        Take it as scanned
      </Button>
      <Button look="ink" size="rig" disabled={confirm.busy} onClick={() => void send(code)}>
        No scanner: the bag is labelled, the tray is empty
      </Button>
    </form>
  );
}
