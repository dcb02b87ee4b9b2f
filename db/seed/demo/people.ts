import { randomInt } from 'node:crypto';
import type { Role } from '@/lib/fleet/rights';

interface DemoPerson {
  name: string;
  email: string;
  role: Role;
}

const DOMAIN = 'ellwand-demo.example';

export const WORKSHOP_NAME = 'Kiebitz bench works';

/** One person a role; all invented. */
export const DEMO_PEOPLE: readonly DemoPerson[] = [
  { name: 'Ines Radauer', email: `operator@${DOMAIN}`, role: 'operator' },
  { name: 'Bogdan Vrana', email: `scheduler@${DOMAIN}`, role: 'scheduler' },
  { name: 'Tove Lindgaard', email: `maintainer@${DOMAIN}`, role: 'maintainer' },
  { name: 'Mira Oberhauser', email: `owner@${DOMAIN}`, role: 'owner' },
];

const LETTERS = 'abcdefghjkmnpqrstuvwxyz23456789';

/** The demo's one password, another for each instance: three groups of four, about 59 bits. */
export function makeDemoPassword(): string {
  const group = () => Array.from({ length: 4 }, () => LETTERS[randomInt(LETTERS.length)]).join('');
  return [group(), group(), group()].join('-');
}
