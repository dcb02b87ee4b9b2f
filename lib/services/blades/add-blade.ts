import { blades } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { addBladeSchema } from '@/lib/schemas/setup-stock';
import type { BladeDto } from '@/lib/schemas/stock';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { bladeDto } from './blade-dto';

/** Adds a spare blade. @throws EllwandError `already-exists` for a label that is taken. */
export async function addBlade({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<BladeDto> {
  authorise(ctx, 'blades.write');
  const blade = parseInput(addBladeSchema, input);
  return inTransaction(ctx, async (inner) => {
    const [row] = await inner.db
      .insert(blades)
      .values({ ...blade, createdAt: ctx.now })
      .returning();
    if (!row) throw new EllwandError('unexpected');
    await audit(inner, 'blade.add', `blade:${row.id}`, { ...blade });
    return bladeDto(row);
  });
}
