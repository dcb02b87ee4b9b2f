import type { ReactNode } from 'react';

/** The head of a desk page: its name, one sentence, and what can be done on the right. */
export function PageHead({
  title,
  children,
  actions,
}: {
  title: string;
  children?: ReactNode;
  actions?: ReactNode;
}) {
  return (
    <div className="page flex flex-wrap items-end justify-between gap-4 border-b border-line pt-6 pb-4">
      <div>
        <h1 className="text-2xl">{title}</h1>
        {children ? <div className="text-soft">{children}</div> : null}
      </div>
      {actions ? <div className="flex flex-wrap gap-3">{actions}</div> : null}
    </div>
  );
}
