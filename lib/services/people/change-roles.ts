import { eq } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { changeRolesSchema } from '@/lib/schemas/people';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { tell } from '../tell';
import { inTransaction } from '../transaction';
import { lockPerson, refuseLastOwner } from './lock-person';

/**
 * Gives a person other roles, from their next request on.
 * @throws EllwandError `illegal-step` when the last owner would lose the role.
 */
export async function changeRoles({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  authorise(ctx, 'people.write');
  const { personId, roles } = parseInput(changeRolesSchema, input);
  return inTransaction(ctx, async (inner) => {
    const { person, isLastOwner } = await lockPerson(inner, personId);
    if (isLastOwner && !roles.includes('owner')) refuseLastOwner();
    await inner.db.update(people).set({ roles }).where(eq(people.id, personId));
    await audit(inner, 'person.change-roles', `person:${personId}`, { from: person.roles, to: roles });
    await tell(inner, { news: 'person', personId });
  });
}
