'use client';

import { useId, type ReactNode } from 'react';
import { Button } from '@/components/ui/button';
import { Keypad } from '@/components/ui/keypad';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RigDto } from '@/lib/schemas/floor';

export const CODE_DIGITS = 4;

interface CodeEntryProps {
  rig: RigDto;
  value: string;
  onChange: (value: string) => void;
}

/** Proof that somebody stands there: the code that the rig's display shows, typed here or on the keypad. */
export function CodeEntry({ rig, value, onChange }: CodeEntryProps) {
  const id = useId();
  const show = useRunAction('showCode');
  return (
    <div className="flex flex-wrap items-center gap-4">
      <div>
        <label htmlFor={id} className="block font-bold">
          Type the code shown on the rig
        </label>
        <p className="text-soft">It shows that somebody is standing there.</p>
        {rig.virtualDisplay ? (
          <p>
            Virtual rig, its display reads <span className="font-code font-bold">{rig.virtualDisplay}</span>
          </p>
        ) : null}
      </div>
      <input
        id={id}
        inputMode="none"
        autoComplete="off"
        value={value}
        maxLength={CODE_DIGITS}
        onChange={(event) => onChange(event.target.value.replace(/\D/g, ''))}
        className="figure h-16 w-44 rounded-[2px] border border-ink bg-sheet px-4 text-3xl tracking-[0.3em]"
      />
      <Button size="rig" disabled={show.busy} onClick={() => void show.act({ rigId: rig.id })}>
        Show a code
      </Button>
      {show.problem ? (
        <p role="alert" className="font-bold text-signal">
          {show.problem.title}
        </p>
      ) : null}
      <Keypad label="Code" value={value} onChange={onChange} lengthMax={CODE_DIGITS} />
    </div>
  );
}

/** What stands where no display is fitted. */
export function NoDisplay({ rig, children }: { rig: RigDto; children?: ReactNode }) {
  return (
    <p className="max-w-prose">
      {rig.name} has no display fitted: stand at it, read its name on the rig, and see that nobody’s hands are
      near. {children}
    </p>
  );
}
