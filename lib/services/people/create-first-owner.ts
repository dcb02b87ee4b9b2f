import { eq } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { workshop } from '@/db/schema/workshop';
import { EllwandError } from '@/lib/errors';
import { firstOwnerSchema, type PersonDto } from '@/lib/schemas/people';
import { audit } from '../audit';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { hashPassword } from './password';
import { personDto } from './person-dto';
import { lockEmptyWorkshop } from './workshop-is-empty';

/**
 * Makes the first person of an empty workshop, its owner, and names the workshop. Whoever asks at the same time
 * waits, and is then refused.
 * @throws EllwandError `workshop-not-empty`
 */
export async function createFirstOwner({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<PersonDto> {
  authoriseSystem(ctx);
  const { workshopName, name, email, password } = parseInput(firstOwnerSchema, input);
  const passwordHash = await hashPassword(password);
  return inTransaction(ctx, async (inner) => {
    if (!(await lockEmptyWorkshop(inner))) throw new EllwandError('workshop-not-empty');
    await inner.db.insert(workshop).values({ id: 1 }).onConflictDoNothing();
    await inner.db.update(workshop).set({ name: workshopName }).where(eq(workshop.id, 1));
    const [owner] = await inner.db
      .insert(people)
      .values({ name, email, roles: ['owner'], passwordHash, createdAt: ctx.now })
      .returning();
    if (!owner) throw new EllwandError('unexpected');
    const actor = { kind: 'person' as const, personId: owner.id, name, roles: owner.roles };
    await audit({ ...inner, actor }, 'person.first-owner', `person:${owner.id}`, { name, email });
    return personDto(owner);
  });
}
