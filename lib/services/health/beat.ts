import { heartbeats } from '@/db/schema/workshop';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';

/** Writes a sign of life of a background process. `detail` says what is wrong; empty when nothing is. */
export async function beat({
  ctx,
  name,
  detail = '',
}: {
  ctx: ServiceContext;
  name: 'worker' | 'queue';
  detail?: string;
}): Promise<void> {
  authoriseSystem(ctx);
  const row = { name, at: ctx.now, detail };
  await ctx.db.insert(heartbeats).values(row).onConflictDoUpdate({ target: heartbeats.name, set: row });
}
