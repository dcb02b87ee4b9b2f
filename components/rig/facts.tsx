import type { ReactNode } from 'react';

/** Named facts, one a line. */
export function Facts({ children }: { children: ReactNode }) {
  return <dl className="grid grid-cols-[120px_1fr] gap-x-3 gap-y-1.5">{children}</dl>;
}

export function Fact({
  name,
  children,
  strong = false,
}: {
  name: string;
  children: ReactNode;
  strong?: boolean;
}) {
  return (
    <>
      <dt className="text-soft">{name}</dt>
      <dd className={strong ? 'figure text-xl' : ''}>{children}</dd>
    </>
  );
}
