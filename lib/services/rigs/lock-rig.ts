import { eq } from 'drizzle-orm';
import { rigs } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import type { ServiceContext } from '../context';

/** The rig's row, locked until the transaction ends. @throws EllwandError `not-found` */
export async function lockRig(ctx: ServiceContext, rigId: string): Promise<typeof rigs.$inferSelect> {
  const [rig] = await ctx.db.select().from(rigs).where(eq(rigs.id, rigId)).for('update');
  if (!rig) throw new EllwandError('not-found');
  return rig;
}
