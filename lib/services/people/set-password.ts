import { eq } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { setPasswordSchema } from '@/lib/schemas/people';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { tell } from '../tell';
import { inTransaction } from '../transaction';
import { lockPerson } from './lock-person';
import { hashPassword } from './password';

/** Gives a person a new password; every session of theirs is over, as the old one may be known to somebody else. */
export async function setPassword({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  authorise(ctx, 'people.write');
  const { personId, password } = parseInput(setPasswordSchema, input);
  const passwordHash = await hashPassword(password);
  return inTransaction(ctx, async (inner) => {
    const { person } = await lockPerson(inner, personId);
    await inner.db
      .update(people)
      .set({ passwordHash, sessionEpoch: person.sessionEpoch + 1 })
      .where(eq(people.id, personId));
    await audit(inner, 'person.set-password', `person:${personId}`);
    await tell(inner, { news: 'person', personId });
  });
}
