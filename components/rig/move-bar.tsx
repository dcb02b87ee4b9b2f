'use client';

import { useState, type ReactNode } from 'react';
import { Button } from '@/components/ui/button';
import { Keypad } from '@/components/ui/keypad';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RigPageDto } from '@/lib/schemas/floor';
import { ActBar } from './act-bar';
import { CODE_DIGITS, CodeEntry, NoDisplay } from './code-entry';
import { StopButton } from './stop-button';

interface MoveBarProps {
  page: RigPageDto;
  verb: 'start' | 'goOn';
  /** What the button says: what will happen. */
  label: string;
  /** Why it cannot be pressed yet; null: it can. */
  waitsFor: string | null;
  children?: ReactNode;
}

/** Starting or going on: the code from the display, and the one button after which something moves. */
export function MoveBar({ page, verb, label, waitsFor, children }: MoveBarProps) {
  const [code, setCode] = useState('');
  const move = useRunAction(verb);
  const { rig } = page;
  const run = rig.run;
  if (!run) return null;
  const display = rig.fitted?.display ?? false;
  const ready = waitsFor === null && (!display || code.length === CODE_DIGITS);
  const go = async () => {
    await move.act({ runId: run.id, presenceCode: display ? code : null });
    setCode('');
  };
  const above =
    display && waitsFor === null ? (
      <Keypad row label="Code" value={code} onChange={setCode} lengthMax={CODE_DIGITS} />
    ) : null;
  return (
    <ActBar problem={move.problem} above={above}>
      {waitsFor !== null ? <p className="text-lg font-bold">{waitsFor}</p> : null}
      {waitsFor === null && display ? <CodeEntry rig={rig} value={code} onChange={setCode} /> : null}
      {waitsFor === null && !display ? <NoDisplay rig={rig} /> : null}
      <p className="max-w-56 text-sm leading-snug text-soft">
        By pressing this you say that you stand at the rig and have read the notes. Local safety rules and
        qualified people come first.
      </p>
      <div className="ml-auto flex flex-wrap gap-3">
        <Button look="ink" size="rig" disabled={!ready || move.busy} onClick={() => void go()}>
          {move.busy ? 'Asking the rig' : label}
        </Button>
        {verb === 'goOn' ? <StopButton run={run} /> : null}
        {children}
      </div>
    </ActBar>
  );
}
