import { and, eq, isNull } from 'drizzle-orm';
import { z } from 'zod';
import type { Db } from '@/db/client';
import { people } from '@/db/schema/people';
import type { PersonActor } from '../context';

const sessionSchema = z.object({ personId: z.uuid(), epoch: z.number().int() });

/**
 * The person a session belongs to, with the roles they have now; `null` when the session is none, was ended
 * (its epoch is past) or the person is disabled. Asked on every request, and again by long streams on `person` news.
 */
export async function findSessionActor({
  db,
  session,
}: {
  db: Db;
  session: unknown;
}): Promise<PersonActor | null> {
  const parsed = sessionSchema.safeParse(session);
  if (!parsed.success) return null;
  const { personId, epoch } = parsed.data;
  const [person] = await db
    .select({ name: people.name, roles: people.roles })
    .from(people)
    .where(and(eq(people.id, personId), eq(people.sessionEpoch, epoch), isNull(people.disabledAt)));
  return person ? { kind: 'person', personId, name: person.name, roles: person.roles } : null;
}
