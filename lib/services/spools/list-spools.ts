import { asc, eq, isNull } from 'drizzle-orm';
import { rigs } from '@/db/schema/rigs';
import { spools, wires } from '@/db/schema/stock';
import type { SpoolDto } from '@/lib/schemas/stock';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { spoolDto } from './spool-dto';

/** The spools that have not ended, by label. */
export async function listSpools({ ctx }: { ctx: ServiceContext }): Promise<SpoolDto[]> {
  authorise(ctx, 'floor.read');
  const rows = await ctx.db
    .select({ spool: spools, wire: wires, rigName: rigs.name })
    .from(spools)
    .innerJoin(wires, eq(wires.id, spools.wireId))
    .leftJoin(rigs, eq(rigs.spoolId, spools.id))
    .where(isNull(spools.endedAt))
    .orderBy(asc(spools.label));
  return rows.map(spoolDto);
}
