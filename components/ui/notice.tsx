import type { ReactNode } from 'react';

/** Something abnormal, hatched in ink; `danger` in the signal colour. Said aloud by screen readers. */
export function Notice({
  title,
  danger = false,
  children,
}: {
  title: string;
  danger?: boolean;
  children?: ReactNode;
}) {
  return (
    <div role={danger ? 'alert' : 'status'} className="flex gap-3 border-y border-line bg-sheet">
      <div aria-hidden className={`w-4 shrink-0 ${danger ? 'hatch-signal' : 'hatch'}`} />
      <div className="py-3 pr-4">
        <p className="font-bold">{title}</p>
        {children}
      </div>
    </div>
  );
}
