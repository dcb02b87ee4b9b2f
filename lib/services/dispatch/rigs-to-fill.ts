import { and, asc, desc, eq, inArray, isNull, type SQL } from 'drizzle-orm';
import { profiles, rigReports, rigs, workHolds } from '@/db/schema/rigs';
import { runs } from '@/db/schema/runs';
import { spools } from '@/db/schema/stock';
import { RUN_ACTIVE } from '@/lib/fleet/run';
import { busyOf, type RigStanding } from '@/lib/plan/busy';
import type { RigToFill } from '@/lib/plan/work';
import type { ServiceContext } from '../context';

function selectStanding(ctx: ServiceContext, which: SQL | undefined) {
  const newest = ctx.db
    .selectDistinctOn([profiles.rigId], { rigId: profiles.rigId, profile: profiles.profile })
    .from(profiles)
    .orderBy(profiles.rigId, desc(profiles.version))
    .as('newest');
  return ctx.db
    .select({
      rig: rigs,
      seen: rigReports,
      spool: spools,
      profile: newest.profile,
      holdId: workHolds.id,
      run: { state: runs.state, pieces: runs.pieces, cut: runs.cut, expectedS: runs.expectedS },
    })
    .from(rigs)
    .leftJoin(rigReports, eq(rigReports.rigId, rigs.id))
    .leftJoin(spools, and(eq(spools.id, rigs.spoolId), isNull(spools.endedAt)))
    .leftJoin(newest, eq(newest.rigId, rigs.id))
    .leftJoin(workHolds, and(eq(workHolds.rigId, rigs.id), isNull(workHolds.endedAt)))
    .leftJoin(runs, and(eq(runs.rigId, rigs.id), inArray(runs.state, [...RUN_ACTIVE, 'released'])))
    .where(which)
    .orderBy(asc(rigs.benchOrder), asc(rigs.name));
}

type Row = Awaited<ReturnType<typeof selectStanding>>[number];

function standingOf({ rig, seen, holdId, run }: Row, now: Date): RigStanding {
  return {
    nowMs: now.getTime(),
    outOfService: rig.outOfServiceAt !== null,
    workHold: holdId !== null || (seen?.report.workHold ?? false),
    heardAtMs: rig.agentId !== null && seen?.connectedAt ? seen.heardAt.getTime() : null,
    connected: seen?.report.port === 'open',
    runner: seen?.report.runner ?? null,
    run,
  };
}

function rigToFill(row: Row, now: Date): RigToFill {
  const { rig, spool, profile } = row;
  return {
    rigId: rig.id,
    name: rig.name,
    benchOrder: rig.benchOrder,
    wireId: spool?.wireId ?? null,
    spoolLeftMm: spool ? Math.max(0, spool.lengthMm - spool.usedMm) : 0,
    limits: profile && {
      shortestPieceMm: profile.feed.shortestPieceMm,
      longestPieceMm: profile.feed.longestPieceMm,
      trimMm: profile.feed.trimMm,
    },
    busy: busyOf(standingOf(row, now)),
  };
}

/** Rigs in bench order with what is loaded and whether they are free: all of them, or one. */
export async function selectRigsToFill(ctx: ServiceContext, rigId?: string): Promise<RigToFill[]> {
  const rows = await selectStanding(ctx, rigId === undefined ? undefined : eq(rigs.id, rigId));
  return rows.map((row) => rigToFill(row, ctx.now));
}
