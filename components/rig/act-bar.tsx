import type { ReactNode } from 'react';
import type { RunProblem } from '@/components/runs/use-run-action';

interface ActBarProps {
  children: ReactNode;
  problem?: RunProblem | null;
  /** A row above the acts, such as a keypad. */
  above?: ReactNode;
}

/** The bar at the foot of a rig's page: what can be done now, and why it was refused. */
export function ActBar({ children, problem, above }: ActBarProps) {
  return (
    <div className="bleed sticky bottom-0 z-10 self-end border-t-2 border-ink bg-sheet lg:col-span-2">
      {problem ? (
        <p
          role="alert"
          className="page flex items-center gap-3 border-b border-line py-2 font-bold text-signal"
        >
          <span aria-hidden className="hatch-signal h-4 w-6 shrink-0" />
          {problem.title}
        </p>
      ) : null}
      {above ? <div className="page pt-3">{above}</div> : null}
      <div className="page flex flex-wrap items-center justify-between gap-4 py-3">{children}</div>
    </div>
  );
}
