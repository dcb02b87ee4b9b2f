import { createHash } from 'node:crypto';
import { and, desc, eq, inArray, isNull } from 'drizzle-orm';
import { batches, batchLines, lots } from '@/db/schema/batches';
import { profiles, rigs } from '@/db/schema/rigs';
import { runs } from '@/db/schema/runs';
import { blades, spools } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import { RUN_ACTIVE } from '@/lib/fleet/run';
import { checkProgram } from '@/lib/program/check';
import { generateProgram } from '@/lib/program/generate';
import type { Profile, RunOrder } from '@/lib/program/profile';
import { endAlarms } from '../alarms/end-alarms';
import { raiseAlarm } from '../alarms/raise-alarm';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { lockRig } from '../rigs/lock-rig';
import { tell } from '../tell';
import { issueCommand } from '../traffic/issue-command';
import { readWorkshop } from '../workshop/read-workshop';

/** A run that waits on its rig; or why the rig cannot cut the lot, for a person, and nothing was changed. */
export type Prepared = { ok: true; runId: string } | { ok: false; reason: string };

type RigRow = typeof rigs.$inferSelect;

/**
 * Tags go round from 1 to 99, so that a register left by an earlier run is not taken for this one's; those of runs on
 * other rigs are left out, so that two rigs whose cables are swapped do not pass for each other.
 */
async function nextTag(ctx: ServiceContext, { lastTag }: RigRow): Promise<number> {
  const rows = await ctx.db
    .select({ tag: runs.tag })
    .from(runs)
    .where(inArray(runs.state, [...RUN_ACTIVE, 'released']));
  const taken = new Set(rows.map(({ tag }) => tag));
  const inTurn = Array.from({ length: 99 }, (_, step) => ((lastTag + step) % 99) + 1);
  return inTurn.find((tag) => !taken.has(tag)) ?? (lastTag % 99) + 1;
}

async function lotToCut(ctx: ServiceContext, lotId: string) {
  const [found] = await ctx.db
    .select({ lot: lots, line: batchLines, batch: batches })
    .from(lots)
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(batches, eq(batches.id, batchLines.batchId))
    .where(eq(lots.id, lotId))
    .for('update', { of: lots });
  if (!found) throw new EllwandError('not-found');
  return found;
}

/** @throws EllwandError `rig-busy` or `tray-not-cleared`: a rig has one lot, from its giving to the empty tray. */
async function requireFreeRig(ctx: ServiceContext, rigId: string): Promise<void> {
  const [taken] = await ctx.db
    .select({ state: runs.state })
    .from(runs)
    .where(and(eq(runs.rigId, rigId), inArray(runs.state, [...RUN_ACTIVE, 'released'])));
  if (!taken) return;
  const inTray = taken.state === 'ended' || taken.state === 'released';
  throw new EllwandError(inTray ? 'tray-not-cleared' : 'rig-busy');
}

async function equipmentOf(ctx: ServiceContext, rig: RigRow) {
  const [newest] = await ctx.db
    .select()
    .from(profiles)
    .where(eq(profiles.rigId, rig.id))
    .orderBy(desc(profiles.version))
    .limit(1);
  const [blade] = await ctx.db
    .select({ id: blades.id })
    .from(blades)
    .where(and(eq(blades.rigId, rig.id), isNull(blades.removedAt)));
  const [spool] = rig.spoolId ? await ctx.db.select().from(spools).where(eq(spools.id, rig.spoolId)) : [];
  return { newest, blade, spool };
}

function programOf(profile: Profile, order: RunOrder) {
  const { text, durationS } = generateProgram(profile, order);
  return { text, durationS, problems: checkProgram(text, profile, order) };
}

/**
 * Gives a waiting lot to a free rig: makes and checks the program, writes the run, tells the agent to take it. Called
 * by dispatch inside its transaction. A program beyond the profile's limits raises `program refused` and is answered
 * with the reason; the lot waits on.
 * @throws EllwandError `rig-busy`, `tray-not-cleared`, `out-of-service`, `wrong-wire`, `rig-silent` (no agent),
 * `illegal-step` (the lot is not waiting, or the rig has no profile).
 */
export async function prepareRun({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: { lotId: string; rigId: string };
}): Promise<Prepared> {
  authoriseSystem(ctx);
  const rig = await lockRig(ctx, input.rigId);
  if (rig.outOfServiceAt) throw new EllwandError('out-of-service');
  await requireFreeRig(ctx, rig.id);
  const { lot, line, batch } = await lotToCut(ctx, input.lotId);
  const { newest, blade, spool } = await equipmentOf(ctx, rig);
  if (spool?.wireId !== line.wireId) throw new EllwandError('wrong-wire');
  if (lot.state !== 'waiting' || lot.pieces < 1 || !newest) throw new EllwandError('illegal-step');
  const order = { tag: await nextTag(ctx, rig), pieces: lot.pieces, lengthMm: line.lengthMm };
  const { text, durationS, problems } = programOf(newest.profile, order);
  const [problem] = problems;
  if (problem) return refuse(ctx, rig, problem.message);
  const fence = rig.fence + 1;
  await ctx.db.update(rigs).set({ fence, lastTag: order.tag }).where(eq(rigs.id, rig.id));
  await ctx.db
    .update(lots)
    .set({ state: 'given', rigId: rig.id, waitingReason: '' })
    .where(eq(lots.id, lot.id));
  const { firstPieces } = await readWorkshop({ ctx });
  const [run] = await ctx.db
    .insert(runs)
    .values({
      lotId: lot.id,
      rigId: rig.id,
      fence,
      tag: order.tag,
      pieces: order.pieces,
      lengthMm: order.lengthMm,
      wireId: line.wireId,
      spoolId: spool.id,
      bladeId: blade?.id ?? null,
      profileId: newest.id,
      firstPieces: Math.min(firstPieces, order.pieces),
      program: text,
      programSha256: createHash('sha256').update(text, 'utf8').digest('hex'),
      expectedS: durationS,
      preparedAt: ctx.now,
      stateSince: ctx.now,
    })
    .returning({ id: runs.id });
  if (!run) throw new EllwandError('unexpected');
  // Nobody presses a button for dispatch: it acts for the person who ordered the batch.
  await issueCommand(ctx, batch.createdBy, { kind: 'take-program', rigId: rig.id, runId: run.id });
  await endAlarms(ctx, { rigIds: [rig.id], kinds: ['program refused'] });
  await tell(ctx, { news: 'rig', rigId: rig.id });
  await tell(ctx, { news: 'batch', batchId: batch.id });
  return { ok: true, runId: run.id };
}

async function refuse(ctx: ServiceContext, rig: RigRow, problem: string): Promise<Prepared> {
  await raiseAlarm(ctx, { kind: 'program refused', rigId: rig.id, runId: null, details: { problem } });
  return { ok: false, reason: `${rig.name} cannot cut it: ${problem}` };
}
