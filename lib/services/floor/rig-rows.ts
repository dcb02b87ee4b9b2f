import { and, asc, desc, eq, inArray, isNull, max } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { agents, interlockNotes, profiles, rigReports, rigs, workHolds } from '@/db/schema/rigs';
import { runs } from '@/db/schema/runs';
import { blades, spools, wires } from '@/db/schema/stock';
import { alarms } from '@/db/schema/traffic';
import { type RigFacts, rigState } from '@/lib/fleet/rig-state';
import { RUN_ACTIVE } from '@/lib/fleet/run';
import { guardDelayS } from '@/lib/program/guard';
import type { AlarmDto, RigDto } from '@/lib/schemas/floor';
import type { RunDto } from '@/lib/schemas/run';
import { bladeDto } from '../blades/blade-dto';
import type { ServiceContext } from '../context';
import { spoolDto } from '../spools/spool-dto';
import { selectStandingAlarms } from './alarm-rows';
import { selectRuns } from './run-rows';

function select(ctx: ServiceContext) {
  const newest = ctx.db
    .selectDistinctOn([profiles.rigId], {
      rigId: profiles.rigId,
      version: profiles.version,
      profile: profiles.profile,
    })
    .from(profiles)
    .orderBy(profiles.rigId, desc(profiles.version))
    .as('newest');
  const notes = ctx.db
    .select({ rigId: interlockNotes.rigId, version: max(interlockNotes.version).as('notes_version') })
    .from(interlockNotes)
    .groupBy(interlockNotes.rigId)
    .as('notes');
  return ctx.db
    .select({
      rig: rigs,
      agentName: agents.name,
      seen: rigReports,
      spool: spools,
      wire: wires,
      blade: blades,
      profileVersion: newest.version,
      profile: newest.profile,
      notesVersion: notes.version,
      hold: workHolds,
      holderName: people.name,
    })
    .from(rigs)
    .leftJoin(agents, eq(agents.id, rigs.agentId))
    .leftJoin(rigReports, eq(rigReports.rigId, rigs.id))
    .leftJoin(spools, eq(spools.id, rigs.spoolId))
    .leftJoin(wires, eq(wires.id, spools.wireId))
    .leftJoin(blades, and(eq(blades.rigId, rigs.id), isNull(blades.removedAt)))
    .leftJoin(newest, eq(newest.rigId, rigs.id))
    .leftJoin(notes, eq(notes.rigId, rigs.id))
    .leftJoin(workHolds, and(eq(workHolds.rigId, rigs.id), isNull(workHolds.endedAt)))
    .leftJoin(people, eq(people.id, workHolds.personId));
}

type Row = Awaited<ReturnType<typeof select>>[number];

function factsOf(row: Row, run: RunDto | null, now: Date): RigFacts {
  const { rig, seen } = row;
  return {
    outOfService: rig.outOfServiceAt !== null,
    workHold: row.hold !== null || (seen?.report.workHold ?? false),
    heardAgoMs: seen?.connectedAt ? now.getTime() - seen.heardAt.getTime() : null,
    connected: seen?.report.port === 'open',
    guard: seen?.report.signals.guard.reading ?? 'unknown',
    runState: run?.state ?? null,
  };
}

function workHoldDto({ hold, holderName }: Row): RigDto['workHold'] {
  if (!hold) return null;
  return {
    personId: hold.personId,
    personName: holderName ?? '',
    beganAt: hold.beganAt.toISOString(),
    standstillAt: hold.standstillAt?.toISOString() ?? null,
  };
}

function rigDto(row: Row, run: RunDto | null, standing: AlarmDto[], now: Date): RigDto {
  const { rig, seen, spool, wire, blade } = row;
  const report = seen?.report;
  return {
    id: rig.id,
    at: now.toISOString(),
    name: rig.name,
    bay: rig.bay,
    benchOrder: rig.benchOrder,
    state: rigState(factsOf(row, run, now)),
    heardAt: seen?.connectedAt ? seen.heardAt.toISOString() : null,
    connected: report?.port === 'open',
    portProblem: report?.portProblem ?? null,
    agentName: row.agentName,
    firmwareName: report?.firmware?.name ?? null,
    virtual: report?.firmware?.virtual ?? false,
    virtualDisplay: report?.virtualDisplay ?? null,
    signals: report?.signals ?? null,
    fitted: row.profile?.fitted ?? null,
    guardDelayS: row.profile ? guardDelayS(row.profile, run?.lengthMm) : null,
    profileVersion: row.profileVersion,
    notesVersion: row.notesVersion,
    workHold: workHoldDto(row),
    outOfServiceReason: rig.outOfServiceAt ? (rig.outOfServiceReason ?? '') : null,
    spool: spool && wire ? spoolDto({ spool, wire, rigName: rig.name }) : null,
    blade: blade ? bladeDto(blade) : null,
    run,
    alarms: standing,
  };
}

/**
 * Rigs as the floor shows them, in bench order: all of them, or those of `rigIds`. Three queries, however many rigs.
 * A rig's run is the one that owns it, up to the empty tray.
 */
export async function selectRigs(ctx: ServiceContext, rigIds?: readonly string[]): Promise<RigDto[]> {
  if (rigIds?.length === 0) return [];
  const ids = rigIds ? [...rigIds] : null;
  const onRig = inArray(runs.state, [...RUN_ACTIVE, 'released']);
  const [rows, current, standing] = await Promise.all([
    select(ctx)
      .where(ids ? inArray(rigs.id, ids) : undefined)
      .orderBy(asc(rigs.benchOrder), asc(rigs.name)),
    selectRuns(ctx, and(onRig, ids ? inArray(runs.rigId, ids) : undefined)),
    selectStandingAlarms(ctx, ids ? inArray(alarms.rigId, ids) : undefined),
  ]);
  const runOf = new Map(current.map((run) => [run.rigId, run]));
  return rows.map((row) =>
    rigDto(
      row,
      runOf.get(row.rig.id) ?? null,
      standing.filter((alarm) => alarm.rigId === row.rig.id),
      ctx.now,
    ),
  );
}
