'use client';

import Link from 'next/link';
import { usePathname } from 'next/navigation';
import { LinkWord } from '@/components/live/link-state';
import { Ruler } from '@/components/ui/ruler';
import type { Right } from '@/lib/fleet/rights';
import { routes } from '@/lib/routes';
import { useRights } from './rights';
import { SignOut } from './sign-out';

const ROOMS: { title: string; href: string; right: Right }[] = [
  { title: 'Floor', href: routes.floor(), right: 'floor.read' },
  { title: 'Batches', href: routes.batches(), right: 'batches.read' },
  { title: 'Set-up', href: routes.setup(), right: 'setup.read' },
];

function isHere(pathname: string, href: string): boolean {
  if (href === routes.floor()) return pathname === href || pathname.startsWith('/rigs/');
  return pathname === href || pathname.startsWith(`${href}/`);
}

/** The head of every page: the rooms, who is signed in, whether it is live; its foot is the edge of a rule. */
export function Head({ personName }: { personName: string }) {
  const pathname = usePathname();
  const may = useRights();
  return (
    <header className="no-print border-b border-line bg-sheet">
      <div className="page flex flex-wrap items-center justify-between gap-x-8">
        <div className="flex items-center gap-x-8">
          <Link href={routes.floor()} className="name py-3 text-[21px]">
            Ellwand
          </Link>
          <nav aria-label="Rooms" className="flex gap-x-2">
            {ROOMS.filter((room) => may(room.right)).map((room) => (
              <Link
                key={room.href}
                href={room.href}
                aria-current={isHere(pathname, room.href) ? 'page' : undefined}
                className="flex min-h-11 items-center border-b-[3px] border-transparent px-2 text-soft hover:text-ink aria-[current]:border-ink aria-[current]:font-bold aria-[current]:text-ink"
              >
                {room.title}
              </Link>
            ))}
          </nav>
        </div>
        <div className="flex items-center gap-3 text-soft">
          <span>
            {personName} · <LinkWord />
          </span>
          <SignOut />
        </div>
      </div>
      <div className="page">
        <Ruler />
      </div>
    </header>
  );
}
