import { wires } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { addWireSchema } from '@/lib/schemas/setup-stock';
import type { WireDto } from '@/lib/schemas/stock';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { causes } from '../tell';
import { inTransaction } from '../transaction';
import { wireDto } from './wire-dto';

/** Adds a kind of wire. @throws EllwandError `already-exists` when gauge, conductor, insulation and colour are known. */
export async function addWire({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<WireDto> {
  authorise(ctx, 'wires.write');
  const wire = parseInput(addWireSchema, input);
  return inTransaction(ctx, async (inner) => {
    const [row] = await inner.db
      .insert(wires)
      .values({ ...wire, createdAt: ctx.now })
      .returning();
    if (!row) throw new EllwandError('unexpected');
    await audit(inner, 'wire.add', `wire:${row.id}`, { ...wire });
    await causes(inner, { topic: 'dispatch', payload: { because: 'wire added' } });
    return wireDto(row);
  });
}
