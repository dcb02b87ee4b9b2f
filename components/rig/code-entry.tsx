'use client';

import { useId } from 'react';
import { Button } from '@/components/ui/button';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RigDto } from '@/lib/schemas/floor';

export const CODE_DIGITS = 4;

interface CodeEntryProps {
  rig: RigDto;
  value: string;
  onChange: (value: string) => void;
}

/** Proof that somebody stands there: the code that the rig's display shows, typed here or on the keypad above. */
export function CodeEntry({ rig, value, onChange }: CodeEntryProps) {
  const id = useId();
  const show = useRunAction('showCode');
  return (
    <>
      <div className="min-w-56">
        <label htmlFor={id} className="block font-bold">
          Type the code shown on the rig
        </label>
        {rig.virtualDisplay ? (
          <p>
            Virtual rig, its display reads <strong className="font-mono">{rig.virtualDisplay}</strong>
          </p>
        ) : (
          <p className="text-soft">It shows that somebody is standing there.</p>
        )}
        {show.problem ? (
          <p role="alert" className="font-bold text-signal">
            {show.problem.title}
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
        className="figure h-16 w-32 rounded-[2px] border border-ink bg-sheet px-3 text-3xl tracking-[0.2em]"
      />
      <Button size="rig" disabled={show.busy} onClick={() => void show.act({ rigId: rig.id })}>
        Show a code
      </Button>
    </>
  );
}

/** What stands where no display is fitted. */
export function NoDisplay({ rig }: { rig: RigDto }) {
  return (
    <p className="max-w-md">
      {rig.name} has no display fitted: stand at it, read its name on the rig, and see that nobody’s hands are
      near.
    </p>
  );
}
