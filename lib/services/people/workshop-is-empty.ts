import { sql } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import type { ServiceContext } from '../context';

/** Whether nobody belongs to the workshop yet, so that the first-owner page stands open. */
export async function workshopIsEmpty({ ctx }: { ctx: ServiceContext }): Promise<boolean> {
  const found = await ctx.db.select({ id: people.id }).from(people).limit(1);
  return found.length === 0;
}

/** The same, with everybody else who wants to be first made to wait until the caller's transaction ends. */
export async function lockEmptyWorkshop(ctx: ServiceContext): Promise<boolean> {
  await ctx.db.execute(sql`select pg_advisory_xact_lock(732002)`);
  return workshopIsEmpty({ ctx });
}
