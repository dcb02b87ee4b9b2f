import { and, desc, eq, inArray, isNull, ne } from 'drizzle-orm';
import { agents, profiles, rigReports, type rigs, workHolds } from '@/db/schema/rigs';
import { acknowledgements, runs } from '@/db/schema/runs';
import { spools } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { piecesToMeasure } from '@/lib/fleet/first-pieces';
import { may } from '@/lib/fleet/rights';
import type { StartFacts } from '@/lib/fleet/start-conditions';
import type { Profile } from '@/lib/program/profile';
import { wireNeededMm } from '@/lib/program/wire-needed';
import type { Conditions } from '@/lib/protocol/commands';
import type { RigReport } from '@/lib/protocol/report';
import { isRecentAgent } from '@/lib/protocol/version';
import type { PersonActor, ServiceContext } from '../context';
import { notesInForce } from './acknowledge-notes';
import type { LockedRun } from './lock-run';
import type { RunRow } from './run-columns';

type RigRow = typeof rigs.$inferSelect;

/** What decides, and what the command must vouch for; `conditions` is null where the notes are not acknowledged. */
export interface StartReading {
  facts: StartFacts;
  conditions: Conditions | null;
}

async function profileOf(ctx: ServiceContext, profileId: string): Promise<Profile> {
  const [row] = await ctx.db
    .select({ profile: profiles.profile })
    .from(profiles)
    .where(eq(profiles.id, profileId));
  if (!row) throw new EllwandError('not-found');
  return row.profile;
}

async function acknowledgementOf(ctx: ServiceContext, run: RunRow, personId: string) {
  const notes = await notesInForce(ctx, run.rigId);
  if (!notes) return null;
  const [last] = await ctx.db
    .select({ at: acknowledgements.at })
    .from(acknowledgements)
    .where(
      and(
        eq(acknowledgements.runId, run.id),
        eq(acknowledgements.personId, personId),
        eq(acknowledgements.notesId, notes.id),
      ),
    )
    .orderBy(desc(acknowledgements.at))
    .limit(1);
  return last ? { version: notes.version, at: last.at } : null;
}

/** Work hold, tray and spool of a rig as they are now. */
async function standingOf(ctx: ServiceContext, rig: RigRow, run: RunRow) {
  const [hold] = await ctx.db
    .select({ id: workHolds.id })
    .from(workHolds)
    .where(and(eq(workHolds.rigId, rig.id), isNull(workHolds.endedAt)));
  const [inTray] = await ctx.db
    .select({ id: runs.id })
    .from(runs)
    .where(and(eq(runs.rigId, rig.id), ne(runs.id, run.id), inArray(runs.state, ['ended', 'released'])));
  const [spool] = rig.spoolId ? await ctx.db.select().from(spools).where(eq(spools.id, rig.spoolId)) : [];
  return {
    workHold: hold !== undefined,
    trayCleared: inTray === undefined,
    loadedWireId: spool?.wireId ?? null,
    spoolLeftMm: spool ? Math.max(0, spool.lengthMm - spool.usedMm) : null,
  };
}

async function isAgentRecent(ctx: ServiceContext, { agentId }: RigRow): Promise<boolean> {
  if (agentId === null) return false;
  const [agent] = await ctx.db
    .select({ software: agents.software })
    .from(agents)
    .where(eq(agents.id, agentId));
  return isRecentAgent(agent?.software ?? null);
}

type SignalFacts = Pick<StartFacts, 'guard' | 'heater' | 'wireSwitch'>;

/** What is read where something is fitted; without a report, or with one that says "not fitted", nothing is. */
function readingOf<Word extends string>(
  fitted: boolean,
  signal: { reading: Word | 'unknown' | 'not fitted'; readAt?: string } | undefined,
  now: Date,
): { fitted: false } | { fitted: true; reading: Word | 'unknown'; ageMs: number } {
  if (!fitted) return { fitted };
  if (!signal || signal.reading === 'not fitted' || signal.readAt === undefined) {
    return { fitted, reading: 'unknown', ageMs: Infinity };
  }
  return { fitted, reading: signal.reading, ageMs: now.getTime() - Date.parse(signal.readAt) };
}

function signalFacts({ fitted }: Profile, report: RigReport | undefined, now: Date): SignalFacts {
  const signals = report?.signals;
  return {
    guard: readingOf<'closed' | 'open'>(fitted.guardSwitch !== null, signals?.guard, now),
    heater: readingOf<'off' | 'on' | 'warm'>(fitted.heater, signals?.heater, now),
    wireSwitch: readingOf<'present' | 'missing'>(fitted.wireSwitch, signals?.wire, now),
  };
}

/** Reads everything that law 5 asks about a run on its locked rig. */
export async function readStartFacts(
  ctx: ServiceContext<PersonActor>,
  { rig, run }: LockedRun,
  action: StartFacts['action'],
  presenceCode: string | null,
): Promise<StartReading> {
  const { personId, roles } = ctx.actor;
  const profile = await profileOf(ctx, run.profileId);
  const standing = await standingOf(ctx, rig, run);
  const acknowledged = await acknowledgementOf(ctx, run, personId);
  const [seen] = await ctx.db.select().from(rigReports).where(eq(rigReports.rigId, rig.id));
  const heldForThem = run.state === 'held' && run.holdReason === 'first-pieces';
  const facts: StartFacts = {
    action,
    mayOperate: may(roles, 'runs.operate'),
    runState: run.state,
    fenceCurrent: run.fence === rig.fence,
    outOfService: rig.outOfServiceAt !== null,
    heardAgoMs: seen?.connectedAt ? ctx.now.getTime() - seen.heardAt.getTime() : null,
    connected: seen?.report.port === 'open',
    agentRecent: await isAgentRecent(ctx, rig),
    workHold: standing.workHold || (seen?.report.workHold ?? false),
    trayCleared: standing.trayCleared,
    programHeld: run.programHeldAt !== null,
    notesAcknowledged: acknowledged !== null,
    doubtOpen: run.doubtPiece !== null,
    piecesToMeasure: piecesToMeasure({ ...run, heldForThem }).length,
    ...signalFacts(profile, seen?.report, ctx.now),
    wireNeededId: run.wireId,
    wireLoadedId: standing.loadedWireId,
    spoolLeftMm: standing.spoolLeftMm,
    wireNeededMm: wireNeededMm(profile, { pieces: run.pieces - run.cut, lengthMm: run.lengthMm }),
    displayFitted: profile.fitted.display,
    presenceCode,
  };
  const conditions = acknowledged && {
    notesVersion: acknowledged.version,
    acknowledgedBy: personId,
    acknowledgedAt: acknowledged.at.toISOString(),
    ...standing,
  };
  return { facts, conditions };
}
