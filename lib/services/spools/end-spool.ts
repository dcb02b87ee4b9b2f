import { and, eq, isNull } from 'drizzle-orm';
import { rigs } from '@/db/schema/rigs';
import { spools } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { endSpoolSchema } from '@/lib/schemas/setup-stock';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';

/** Says that a spool is empty or gone. @throws EllwandError `illegal-step` while it is on a rig. */
export async function endSpool({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<void> {
  authorise(ctx, 'stock.write');
  const { spoolId } = parseInput(endSpoolSchema, input);
  return inTransaction(ctx, async (inner) => {
    const [ended] = await inner.db
      .update(spools)
      .set({ endedAt: ctx.now })
      .where(and(eq(spools.id, spoolId), isNull(spools.endedAt)))
      .returning({ usedMm: spools.usedMm });
    if (!ended) throw new EllwandError('not-found');
    const [rig] = await inner.db.select({ name: rigs.name }).from(rigs).where(eq(rigs.spoolId, spoolId));
    if (rig) {
      throw new EllwandError('illegal-step', {
        fields: [{ path: 'spoolId', message: `It is on ${rig.name}. Take it off there first.` }],
      });
    }
    await audit(inner, 'spool.end', `spool:${spoolId}`, ended);
  });
}
