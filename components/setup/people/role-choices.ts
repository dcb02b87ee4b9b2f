import type { Role } from '@/lib/fleet/rights';

const HINTS: Record<Role, string> = {
  operator: 'walks the row: loads, starts, measures, empties trays',
  scheduler: 'makes batches and queues them',
  maintainer: 'keeps rigs true: profiles, notes, blades',
  owner: 'adds people, rigs and agents',
};

/** The four roles with what each does, in the order of the table of rights. */
export const ROLE_CHOICES = (Object.keys(HINTS) as Role[]).map((role) => ({
  value: role,
  label: role,
  hint: HINTS[role],
}));
