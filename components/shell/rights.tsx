'use client';

import { createContext, useContext, type ReactNode } from 'react';
import { may, type Right, type Role } from '@/lib/fleet/rights';

const RolesContext = createContext<readonly Role[]>([]);

/** Hands the signed-in person's roles to everything below. The services check again. */
export function RightsProvider({ roles, children }: { roles: readonly Role[]; children: ReactNode }) {
  return <RolesContext value={roles}>{children}</RolesContext>;
}

/** Asks whether the signed-in person may do something, by the one table of rights. */
export function useRights(): (right: Right) => boolean {
  const roles = useContext(RolesContext);
  return (right) => may(roles, right);
}
