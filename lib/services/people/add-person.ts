import { people } from '@/db/schema/people';
import { EllwandError } from '@/lib/errors';
import { addPersonSchema, type PersonDto } from '@/lib/schemas/people';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { causes } from '../tell';
import { inTransaction } from '../transaction';
import { hashPassword } from './password';
import { personDto } from './person-dto';

/** Adds a person and has them written to, without the password. @throws EllwandError `already-exists` for a known e-mail. */
export async function addPerson({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<PersonDto> {
  authorise(ctx, 'people.write');
  const { name, email, roles, password } = parseInput(addPersonSchema, input);
  const passwordHash = await hashPassword(password);
  return inTransaction(ctx, async (inner) => {
    const [row] = await inner.db
      .insert(people)
      .values({ name, email, roles, passwordHash, createdAt: ctx.now })
      .returning();
    if (!row) throw new EllwandError('unexpected');
    await audit(inner, 'person.add', `person:${row.id}`, { name, email, roles });
    await causes(inner, { topic: 'mail', payload: { personId: row.id, template: 'person-added' } });
    return personDto(row);
  });
}
