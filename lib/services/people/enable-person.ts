import { eq } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { EllwandError } from '@/lib/errors';
import { personIdSchema } from '@/lib/schemas/people';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { lockPerson } from './lock-person';

/** Lets a disabled person sign in again; sessions from before stay over. @throws EllwandError `illegal-step` */
export async function enablePerson({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  authorise(ctx, 'people.write');
  const { personId } = parseInput(personIdSchema, input);
  return inTransaction(ctx, async (inner) => {
    const { person } = await lockPerson(inner, personId);
    if (!person.disabledAt) throw new EllwandError('illegal-step');
    await inner.db.update(people).set({ disabledAt: null }).where(eq(people.id, personId));
    await audit(inner, 'person.enable', `person:${personId}`);
  });
}
