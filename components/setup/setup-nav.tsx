'use client';

import Link from 'next/link';
import { usePathname } from 'next/navigation';
import { useRights } from '@/components/shell/rights';
import type { Right } from '@/lib/fleet/rights';
import { routes } from '@/lib/routes';

const AREAS: readonly { title: string; href: string; right: Right }[] = [
  { title: 'Overview', href: routes.setup(), right: 'setup.read' },
  { title: 'Wires', href: routes.setupWires(), right: 'setup.read' },
  { title: 'Spools', href: routes.setupSpools(), right: 'setup.read' },
  { title: 'Blades', href: routes.setupBlades(), right: 'setup.read' },
  { title: 'Rigs', href: routes.setupRigs(), right: 'setup.read' },
  { title: 'Agents', href: routes.setupAgents(), right: 'setup.read' },
  { title: 'People', href: routes.setupPeople(), right: 'people.write' },
  { title: 'Workshop', href: routes.setupWorkshop(), right: 'setup.read' },
];

function isHere(pathname: string, href: string): boolean {
  return pathname === href || (href !== routes.setup() && pathname.startsWith(`${href}/`));
}

/** The areas of the set-up, those that the person may look at. */
export function SetupNav() {
  const pathname = usePathname();
  const may = useRights();
  return (
    <nav aria-label="Set-up" className="page flex flex-wrap gap-x-2 border-b border-line">
      {AREAS.filter((area) => may(area.right)).map((area) => (
        <Link
          key={area.href}
          href={area.href}
          aria-current={isHere(pathname, area.href) ? 'page' : undefined}
          className="flex min-h-11 items-center px-2 text-soft hover:text-ink aria-[current]:font-bold aria-[current]:text-ink"
        >
          {area.title}
        </Link>
      ))}
    </nav>
  );
}
