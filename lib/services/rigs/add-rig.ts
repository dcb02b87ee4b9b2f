import { rigs } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { addRigSchema } from '@/lib/schemas/setup-rigs';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { tell } from '../tell';
import { inTransaction } from '../transaction';

/** Adds a rig; it can cut once it has a profile, notes, an agent and a spool. @throws EllwandError `already-exists` */
export async function addRig({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<{ id: string }> {
  authorise(ctx, 'rigs.write');
  const rig = parseInput(addRigSchema, input);
  return inTransaction(ctx, async (inner) => {
    const [added] = await inner.db
      .insert(rigs)
      .values({ ...rig, createdAt: ctx.now })
      .returning({ id: rigs.id });
    if (!added) throw new EllwandError('unexpected');
    await audit(inner, 'rig.add', `rig:${added.id}`, { ...rig });
    await tell(inner, { news: 'rig', rigId: added.id });
    return added;
  });
}
