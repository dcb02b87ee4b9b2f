import { sql } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { EllwandError } from '@/lib/errors';
import type { ServiceContext } from '../context';

type Row = typeof people.$inferSelect;

/**
 * One person's row, locked together with every owner's: of two owners who take the role from each other at once,
 * the second sees what the first did.
 * @throws EllwandError `not-found`
 */
export async function lockPerson(
  ctx: ServiceContext,
  personId: string,
): Promise<{ person: Row; isLastOwner: boolean }> {
  const rows = await ctx.db
    .select()
    .from(people)
    .where(sql`${people.id} = ${personId} or 'owner' = any(${people.roles})`)
    .orderBy(people.id)
    .for('update');
  const person = rows.find((row) => row.id === personId);
  if (!person) throw new EllwandError('not-found');
  const owners = rows.filter((row) => row.roles.includes('owner') && !row.disabledAt);
  return { person, isLastOwner: owners.length === 1 && owners[0]?.id === personId };
}

/** @throws EllwandError `illegal-step`: nobody could add people, rigs or agents any more. */
export function refuseLastOwner(): never {
  throw new EllwandError('illegal-step', {
    fields: [{ path: 'roles', message: 'The workshop needs an owner. Make somebody else owner first.' }],
  });
}
