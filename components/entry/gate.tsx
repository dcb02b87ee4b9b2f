import type { ReactNode } from 'react';
import { Ruler } from '@/components/ui/ruler';

/** The page before the workshop: its name over the edge of a rule, one form below. */
export function Gate({ title, children }: { title: string; children: ReactNode }) {
  return (
    <>
      <header className="border-b border-line bg-sheet">
        <div className="page pt-6">
          <p className="name text-[21px]">Ellwand</p>
          <Ruler />
        </div>
      </header>
      <main className="page grid max-w-lg gap-6 py-8">
        <h1 className="text-2xl">{title}</h1>
        {children}
      </main>
    </>
  );
}
