import { asc, isNull } from 'drizzle-orm';
import { blades } from '@/db/schema/stock';
import type { BladeDto } from '@/lib/schemas/stock';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { bladeDto } from './blade-dto';

/** The blades that are spare or fitted, by label; removed ones are history. */
export async function listBlades({ ctx }: { ctx: ServiceContext }): Promise<BladeDto[]> {
  authorise(ctx, 'floor.read');
  const rows = await ctx.db.select().from(blades).where(isNull(blades.removedAt)).orderBy(asc(blades.label));
  return rows.map(bladeDto);
}
