import { eq } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { EllwandError } from '@/lib/errors';
import { personIdSchema } from '@/lib/schemas/people';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { tell } from '../tell';
import { withdrawCommands } from '../traffic/withdraw-commands';
import { inTransaction } from '../transaction';
import { lockPerson, refuseLastOwner } from './lock-person';

/**
 * Shuts a person out: their sessions are over with this commit, their open streams end on the news, and what they
 * asked of rigs and no agent has got yet is taken back.
 * @throws EllwandError `illegal-step` for the last owner, and for somebody who is disabled already.
 */
export async function disablePerson({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  authorise(ctx, 'people.write');
  const { personId } = parseInput(personIdSchema, input);
  return inTransaction(ctx, async (inner) => {
    const { person, isLastOwner } = await lockPerson(inner, personId);
    if (isLastOwner) refuseLastOwner();
    if (person.disabledAt) throw new EllwandError('illegal-step');
    await inner.db
      .update(people)
      .set({ disabledAt: ctx.now, sessionEpoch: person.sessionEpoch + 1 })
      .where(eq(people.id, personId));
    await withdrawCommands(inner, personId);
    await audit(inner, 'person.disable', `person:${personId}`);
    await tell(inner, { news: 'person', personId });
  });
}
