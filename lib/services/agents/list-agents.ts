import { asc, isNotNull } from 'drizzle-orm';
import { agents, rigs } from '@/db/schema/rigs';
import { isRecentAgent } from '@/lib/protocol/version';
import type { AgentDto } from '@/lib/schemas/setup-agents';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';

/** All agents by name, each with its rigs in bench order. */
export async function listAgents({ ctx }: { ctx: ServiceContext }): Promise<AgentDto[]> {
  authorise(ctx, 'setup.read');
  const rows = await ctx.db.select().from(agents).orderBy(asc(agents.name));
  const bound = await ctx.db
    .select({ id: rigs.id, name: rigs.name, agentId: rigs.agentId })
    .from(rigs)
    .where(isNotNull(rigs.agentId))
    .orderBy(asc(rigs.benchOrder));
  return rows.map((row) => ({
    id: row.id,
    name: row.name,
    rigs: bound.filter((rig) => rig.agentId === row.id).map(({ id, name }) => ({ id, name })),
    pairing: pairingOf(row, ctx.now),
    pairingExpiresAt: row.pairingExpiresAt?.toISOString() ?? null,
    pairedAt: row.pairedAt?.toISOString() ?? null,
    software: row.software,
    tooOld: row.software !== null && !isRecentAgent(row.software),
    lastReportAt: row.lastReportAt?.toISOString() ?? null,
  }));
}

function pairingOf(row: typeof agents.$inferSelect, now: Date): AgentDto['pairing'] {
  if (row.revokedAt) return 'revoked';
  if (row.tokenHash) return 'paired';
  return row.pairingExpiresAt && row.pairingExpiresAt > now ? 'waiting' : 'no code';
}
