import type { ReactNode } from 'react';

/** What there is on the left, the form for one more on the right; one above the other where it is narrow. */
export function Sides({ list, form }: { list: ReactNode; form: ReactNode }) {
  return (
    <div className="page grid gap-x-12 gap-y-8 py-6 lg:grid-cols-[minmax(0,1fr)_24rem]">
      <div>{list}</div>
      {form ? <div className="grid content-start gap-4">{form}</div> : null}
    </div>
  );
}

/** Rows on the linen with rules between; what is said when there is none yet. */
export function Rows({ label, none, children }: { label: string; none: string; children: ReactNode[] }) {
  if (children.length === 0) return <p className="border-y border-line py-4 text-soft">{none}</p>;
  return (
    <ul aria-label={label} className="border-t border-line">
      {children}
    </ul>
  );
}

/** One row: the name, then what is to be known of it, then what can be done on the right. */
export function Row({ name, act, children }: { name: ReactNode; act?: ReactNode; children?: ReactNode }) {
  return (
    <li className="grid gap-x-6 gap-y-2 border-b border-line py-3 sm:grid-cols-[minmax(9rem,14rem)_minmax(0,1fr)_minmax(8.5rem,auto)]">
      <div className="name text-lg">{name}</div>
      <div className="min-w-0">{children}</div>
      <div className="flex flex-wrap items-start justify-end gap-3">{act}</div>
    </li>
  );
}

/** Something that is opened when it is needed. */
export function Opened({ title, children }: { title: string; children: ReactNode }) {
  return (
    <details className="mt-1">
      <summary className="inline-flex min-h-11 items-center underline">{title}</summary>
      <div className="grid max-w-xl gap-6 pt-2 pb-3">{children}</div>
    </details>
  );
}
