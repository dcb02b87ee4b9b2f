/** The four roles. A person may hold several. */
export const ROLES = ['operator', 'scheduler', 'maintainer', 'owner'] as const;
export type Role = (typeof ROLES)[number];

/** Who may do what: the only table of rights, checked in every service and read by the screens. */
export const RIGHTS = {
  'floor.read': ['operator', 'scheduler', 'maintainer', 'owner'],
  'batches.read': ['operator', 'scheduler', 'maintainer', 'owner'],
  'batches.write': ['scheduler', 'owner'],
  'runs.operate': ['operator', 'maintainer', 'owner'],
  'runs.stop': ['operator', 'scheduler', 'maintainer', 'owner'],
  'runs.release': ['scheduler', 'maintainer', 'owner'],
  'rigs.hold': ['operator', 'maintainer', 'owner'],
  'rigs.load': ['operator', 'maintainer', 'owner'],
  'rigs.service': ['maintainer', 'owner'],
  'alarms.acknowledge': ['operator', 'scheduler', 'maintainer', 'owner'],
  'stock.write': ['operator', 'scheduler', 'maintainer', 'owner'],
  'blades.write': ['maintainer', 'owner'],
  'profiles.write': ['maintainer', 'owner'],
  'notes.write': ['maintainer', 'owner'],
  'wires.write': ['scheduler', 'maintainer', 'owner'],
  'rigs.write': ['owner'],
  'agents.write': ['owner'],
  'people.write': ['owner'],
  'workshop.write': ['owner'],
  'setup.read': ['scheduler', 'maintainer', 'owner'],
} as const satisfies Record<string, readonly Role[]>;

export type Right = keyof typeof RIGHTS;

/** Whether somebody with these roles has the right. */
export function may(roles: readonly Role[], right: Right): boolean {
  const allowed: readonly Role[] = RIGHTS[right];
  return roles.some((role) => allowed.includes(role));
}
