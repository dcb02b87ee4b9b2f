import type { people } from '@/db/schema/people';
import type { PersonDto } from '@/lib/schemas/people';

/** A person's row as it is answered: without anything that a session or a password is made of. */
export function personDto(row: typeof people.$inferSelect): PersonDto {
  return {
    id: row.id,
    name: row.name,
    email: row.email,
    roles: row.roles,
    disabledAt: row.disabledAt?.toISOString() ?? null,
    createdAt: row.createdAt.toISOString(),
  };
}
