import { inArray, isNull, sql } from 'drizzle-orm';
import { agents } from '@/db/schema/rigs';
import { heartbeats } from '@/db/schema/workshop';
import { SILENT_AFTER_MS } from '@/lib/fleet/rig-state';
import type { Health } from '@/lib/schemas/health';
import type { ServiceContext } from '../context';

/** The worker writes a sign of life every 2 s; one that is older counts as missing. */
export const HEARTBEAT_MAX_AGE_MS = 10_000;

/** What background processes said of themselves lately, and how many agents are known and heard. */
export async function readHealth({ ctx }: { ctx: ServiceContext }): Promise<Omit<Health, 'ok' | 'database'>> {
  const beats = await ctx.db
    .select()
    .from(heartbeats)
    .where(inArray(heartbeats.name, ['worker', 'queue']));
  const beating = (name: string) =>
    beats.some(
      (beat) =>
        beat.name === name &&
        beat.detail === '' &&
        ctx.now.getTime() - beat.at.getTime() <= HEARTBEAT_MAX_AGE_MS,
    );
  const heardSince = new Date(ctx.now.getTime() - SILENT_AFTER_MS);
  const [counted] = await ctx.db
    .select({
      known: sql<number>`count(*)::int`,
      heard: sql<number>`(count(*) filter (where ${agents.lastReportAt} >= ${heardSince}))::int`,
    })
    .from(agents)
    .where(isNull(agents.revokedAt));
  return {
    queue: beating('queue'),
    worker: beating('worker'),
    agents: { known: counted?.known ?? 0, heard: counted?.heard ?? 0 },
  };
}
