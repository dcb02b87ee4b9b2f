'use client';

import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { useRunAction } from '@/components/runs/use-run-action';
import type { RunDto } from '@/lib/schemas/run';

/** One piece whose cut was commanded and never confirmed: a person says what it is, and their name stands by it. */
export function DoubtPanel({ run }: { run: RunDto }) {
  const settle = useRunAction('settlePiece');
  const answer = (word: 'count' | 'discard') => () => void settle.act({ runId: run.id, answer: word });
  return (
    <Notice title={`Piece ${run.doubtPiece ?? run.cut + 1} is in doubt`}>
      <p>
        Its cut was commanded and the rig never confirmed it. The wire’s end is unknown, so a trim comes
        before the next piece.
      </p>
      <ol className="my-2 list-decimal pl-6">
        <li>Look past the jaws: does wire stick out of them?</li>
        <li>Look at the last piece in the tray: is it a whole one of {run.lengthMm} mm?</li>
      </ol>
      <div className="flex flex-wrap gap-3 py-2">
        <Button look="ink" size="rig" disabled={settle.busy} onClick={answer('discard')}>
          Throw it away and cut it anew
        </Button>
        <Button size="rig" disabled={settle.busy} onClick={answer('count')}>
          I hold it: whole and measured, count it
        </Button>
      </div>
      <p className="text-soft">If you are not sure, throw it away. Your name is kept with the answer.</p>
      {settle.problem ? (
        <p role="alert" className="font-bold text-signal">
          {settle.problem.title}
        </p>
      ) : null}
    </Notice>
  );
}
