import { and, isNull, sql } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { EllwandError } from '@/lib/errors';
import { signInSchema } from '@/lib/schemas/people';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { passwordMatches } from './password';
import { forgiveAttempt, reserveAttempt } from './sign-in-limits';

export interface VerifiedPerson {
  personId: string;
  name: string;
  email: string;
  sessionEpoch: number;
}

/**
 * Judges an e-mail and password typed at `address`.
 * @throws EllwandError `too-many-attempts` before anything is compared, `sign-in-refused` for a wrong pair, an
 * unknown and a disabled account alike.
 */
export async function verifySignIn({
  ctx,
  input,
  address,
}: {
  ctx: ServiceContext;
  input: unknown;
  address: string;
}): Promise<VerifiedPerson> {
  authoriseSystem(ctx);
  const parsed = signInSchema.safeParse(input);
  if (!parsed.success) throw new EllwandError('sign-in-refused');
  const { email, password } = parsed.data;
  const attempt = await reserveAttempt(ctx, { email, address });
  const [person] = await ctx.db
    .select()
    .from(people)
    .where(and(sql`lower(${people.email}) = ${email}`, isNull(people.disabledAt)));
  const matches = await passwordMatches(person?.passwordHash ?? null, password);
  if (!person || !matches) throw new EllwandError('sign-in-refused');
  await forgiveAttempt(ctx, attempt);
  return {
    personId: person.id,
    name: person.name,
    email: person.email,
    sessionEpoch: person.sessionEpoch,
  };
}
