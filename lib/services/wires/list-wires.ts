import { asc } from 'drizzle-orm';
import { wires } from '@/db/schema/stock';
import type { WireDto } from '@/lib/schemas/stock';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { wireDto } from './wire-dto';

/** All wires, thickest first, then by insulation and colour. */
export async function listWires({ ctx }: { ctx: ServiceContext }): Promise<WireDto[]> {
  authorise(ctx, 'batches.read');
  const rows = await ctx.db
    .select()
    .from(wires)
    .orderBy(asc(wires.gaugeAwg), asc(wires.insulation), asc(wires.colour), asc(wires.conductor));
  return rows.map(wireDto);
}
