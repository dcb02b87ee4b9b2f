import type { ReactNode } from 'react';
import type { RunProblem } from '@/components/runs/use-run-action';

/** The bar at the foot of a rig's page: what can be done now, and why it was refused. */
export function ActBar({ children, problem }: { children: ReactNode; problem?: RunProblem | null }) {
  return (
    <div className="sticky bottom-0 border-t-2 border-ink bg-sheet">
      {problem ? (
        <p
          role="alert"
          className="page flex items-center gap-3 border-b border-line py-2 font-bold text-signal"
        >
          <span aria-hidden className="hatch-signal h-4 w-6 shrink-0" />
          {problem.title}
        </p>
      ) : null}
      <div className="page flex flex-wrap items-center justify-between gap-4 py-4">{children}</div>
    </div>
  );
}
