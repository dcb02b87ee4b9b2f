import { type SQL, sql } from 'drizzle-orm';
import { people } from '@/db/schema/people';

/**
 * The person of that id as a value for a column, or null when we know none: what an agent reports is kept, also when
 * the person it names is a stranger to us.
 */
export function knownPerson(personId: string | null): SQL<string | null> {
  return sql<string | null>`(select known.id from ${people} as known where known.id = ${personId}::uuid)`;
}
