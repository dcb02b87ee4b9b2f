import { inArray } from 'drizzle-orm';
import { wires } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import type { ServiceContext } from '../context';

/** @throws EllwandError `bad-input` that names each line whose wire is none of the workshop's. */
export async function requireWires(ctx: ServiceContext, lines: readonly { wireId: string }[]): Promise<void> {
  const wanted = [...new Set(lines.map(({ wireId }) => wireId))];
  const rows = await ctx.db.select({ id: wires.id }).from(wires).where(inArray(wires.id, wanted));
  const known = new Set(rows.map(({ id }) => id));
  const fields = lines.flatMap(({ wireId }, index) =>
    known.has(wireId) ? [] : [{ path: `lines.${index}.wireId`, message: 'Pick a wire of the list.' }],
  );
  if (fields.length > 0) throw new EllwandError('bad-input', { fields });
}
