import { and, desc, eq, notInArray } from 'drizzle-orm';
import { z } from 'zod';
import { batches, batchLines, lots } from '@/db/schema/batches';
import { acknowledgements, bags, runs } from '@/db/schema/runs';
import { events } from '@/db/schema/traffic';
import { logText } from '@/lib/fleet/log-text';
import type { RigPageDto } from '@/lib/schemas/floor';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { fullReadAt, notesInForce } from '../runs/acknowledge-notes';
import { readRig } from './read-rig';

const readRigPageSchema = z.object({ rigId: z.uuid() });

const LOG_LINES = 60;

async function lastBagOf(ctx: ServiceContext, rigId: string): Promise<RigPageDto['lastBag']> {
  const [last] = await ctx.db
    .select({ batchName: batches.name, lotNumber: lots.number, clearedAt: bags.clearedAt })
    .from(bags)
    .innerJoin(runs, and(eq(runs.id, bags.runId), eq(runs.rigId, rigId)))
    .innerJoin(lots, eq(lots.id, runs.lotId))
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(batches, eq(batches.id, batchLines.batchId))
    .orderBy(desc(bags.clearedAt))
    .limit(1);
  return last ? { ...last, clearedAt: last.clearedAt.toISOString() } : null;
}

/** The rig's newest events but its pieces, which are counted elsewhere. */
async function logOf(ctx: ServiceContext, rigId: string): Promise<RigPageDto['log']> {
  const rows = await ctx.db
    .select({ at: events.at, body: events.body })
    .from(events)
    .where(and(eq(events.rigId, rigId), notInArray(events.kind, ['piece-cut'])))
    .orderBy(desc(events.receivedAt), desc(events.sequence))
    .limit(LOG_LINES);
  return rows.map(({ at, body }) => ({ at: at.toISOString(), kind: body.kind, text: logText(body) }));
}

async function isAcknowledged(ctx: ServiceContext, runId: string, notesId: string, personId: string) {
  const mine = and(
    eq(acknowledgements.runId, runId),
    eq(acknowledgements.notesId, notesId),
    eq(acknowledgements.personId, personId),
  );
  return (await ctx.db.$count(acknowledgements, mine)) > 0;
}

/** A rig with what this person must read before anything moves. @throws EllwandError `not-found` */
export async function readRigPage({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<RigPageDto> {
  const { personId } = authorise(ctx, 'floor.read');
  const { rigId } = parseInput(readRigPageSchema, input);
  const rig = await readRig({ ctx, rigId });
  const notes = await notesInForce(ctx, rigId);
  const readAt = notes ? await fullReadAt(ctx, personId, notes.id) : null;
  return {
    rig,
    notes: notes
      ? { id: notes.id, version: notes.version, points: notes.points, fullText: notes.fullText }
      : null,
    fullReadAt: readAt?.toISOString() ?? null,
    acknowledged: rig.run && notes ? await isAcknowledged(ctx, rig.run.id, notes.id, personId) : false,
    lastBag: await lastBagOf(ctx, rigId),
    log: await logOf(ctx, rigId),
  };
}
