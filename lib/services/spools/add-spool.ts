import { eq } from 'drizzle-orm';
import { spools, wires } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { addSpoolSchema } from '@/lib/schemas/setup-stock';
import type { SpoolDto } from '@/lib/schemas/stock';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { spoolDto } from './spool-dto';

/** Adds a reel of a known wire. @throws EllwandError `already-exists` for a label that is taken. */
export async function addSpool({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<SpoolDto> {
  authorise(ctx, 'stock.write');
  const wanted = parseInput(addSpoolSchema, input);
  return inTransaction(ctx, async (inner) => {
    const [wire] = await inner.db.select().from(wires).where(eq(wires.id, wanted.wireId));
    if (!wire) throw new EllwandError('bad-input', { fields: [{ path: 'wireId', message: 'Pick a wire.' }] });
    const [spool] = await inner.db
      .insert(spools)
      .values({ ...wanted, createdAt: ctx.now })
      .returning();
    if (!spool) throw new EllwandError('unexpected');
    await audit(inner, 'spool.add', `spool:${spool.id}`, { ...wanted });
    return spoolDto({ spool, wire, rigName: null });
  });
}
