import { eq } from 'drizzle-orm';
import { agents } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import type { ServiceContext } from '../context';

/** The agent's row, locked until the transaction ends. @throws EllwandError `not-found` */
export async function lockAgent(ctx: ServiceContext, agentId: string): Promise<typeof agents.$inferSelect> {
  const [agent] = await ctx.db.select().from(agents).where(eq(agents.id, agentId)).for('update');
  if (!agent) throw new EllwandError('not-found');
  return agent;
}
