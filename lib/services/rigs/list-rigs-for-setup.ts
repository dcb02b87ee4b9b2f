import { and, asc, eq, isNull, sql, type SQL } from 'drizzle-orm';
import { agents, interlockNotes, profiles, rigs } from '@/db/schema/rigs';
import { blades, spools, wires } from '@/db/schema/stock';
import type { RigSetupDto } from '@/lib/schemas/setup-rigs';
import { authorise } from '../authorise';
import { bladeDto } from '../blades/blade-dto';
import type { ServiceContext } from '../context';
import { spoolDto } from '../spools/spool-dto';

/** All rigs in bench order with what is set up for each; or the one with `rigId`, an empty list when there is none. */
export async function listRigsForSetup({
  ctx,
  rigId,
}: {
  ctx: ServiceContext;
  rigId?: string;
}): Promise<RigSetupDto[]> {
  authorise(ctx, 'setup.read');
  const rows = await ctx.db
    .select({
      rig: rigs,
      agentName: agents.name,
      profileVersion: newestOf(sql`${profiles}`),
      notesVersion: newestOf(sql`${interlockNotes}`),
      spool: spools,
      wire: wires,
      blade: blades,
    })
    .from(rigs)
    .leftJoin(agents, eq(agents.id, rigs.agentId))
    .leftJoin(spools, eq(spools.id, rigs.spoolId))
    .leftJoin(wires, eq(wires.id, spools.wireId))
    .leftJoin(blades, and(eq(blades.rigId, rigs.id), isNull(blades.removedAt)))
    .where(rigId ? eq(rigs.id, rigId) : undefined)
    .orderBy(asc(rigs.benchOrder), asc(rigs.name));
  return rows.map(({ rig, agentName, profileVersion, notesVersion, spool, wire, blade }) => ({
    id: rig.id,
    name: rig.name,
    bay: rig.bay,
    benchOrder: rig.benchOrder,
    agentId: rig.agentId,
    agentName,
    profileVersion,
    notesVersion,
    spool: spool && wire ? spoolDto({ spool, wire, rigName: rig.name }) : null,
    blade: blade ? bladeDto(blade) : null,
    outOfServiceReason: rig.outOfServiceReason,
  }));
}

function newestOf(table: SQL): SQL<number | null> {
  return sql<number | null>`(select max(v.version) from ${table} v where v.rig_id = ${rigs.id})`;
}
