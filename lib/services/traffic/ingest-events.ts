import { asc, eq } from 'drizzle-orm';
import { rigs } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import {
  type AgentEvent,
  type EventUpload,
  eventUploadSchema,
  type EventUploadAnswer,
} from '@/lib/protocol/events';
import { raiseAlarm } from '../alarms/raise-alarm';
import { authoriseAgent } from '../authorise';
import type { AgentActor, ServiceContext } from '../context';
import { tell } from '../tell';
import { inTransaction } from '../transaction';
import { applyEvents } from './apply-events';
import { parseSpoken } from './parse-spoken';
import { judgeReplay, requireOrder } from './refuse-events';
import { storeEvents } from './store-events';
import { keepSurplus } from './surplus';

type Events = readonly [AgentEvent, ...AgentEvent[]];

function someOf(events: readonly AgentEvent[]): Events | null {
  const [first, ...rest] = events;
  return first ? [first, ...rest] : null;
}

/** Stores new events and everything that follows from them. False: they do not follow on what is stored. */
async function take(
  ctx: ServiceContext<AgentActor>,
  { journalId }: EventUpload,
  events: Events,
): Promise<boolean> {
  const { accepted, surplus } = await storeEvents(ctx, ctx.actor.agentId, journalId, events);
  if (!accepted) return false;
  await applyEvents(ctx, events);
  await keepSurplus(ctx, surplus);
  const touched = new Set(events.flatMap(({ body }) => ('rigId' in body ? [body.rigId] : [])));
  for (const rigId of touched) await tell(ctx, { news: 'rig', rigId });
  return true;
}

async function tellConflict(ctx: ServiceContext<AgentActor>, events: Events, sequence: number) {
  const named = events.find((event) => event.sequence === sequence)?.body;
  const [any] = await ctx.db
    .select({ id: rigs.id })
    .from(rigs)
    .where(eq(rigs.agentId, ctx.actor.agentId))
    .orderBy(asc(rigs.benchOrder))
    .limit(1);
  const rigId = named && 'rigId' in named ? named.rigId : any?.id;
  if (!rigId) return;
  await raiseAlarm(ctx, {
    kind: 'journal conflict',
    rigId,
    runId: named && 'runId' in named ? named.runId : null,
    details: { agent: ctx.actor.name, sequence },
  });
}

/**
 * Law 7: takes a batch of an agent's events, each once by (agent, journal, sequence). What was stored before is looked
 * at, not stored again; the rest must follow without a gap.
 * @throws EllwandError `journal-gap` with `details.expected`, `event-conflict` with `details.sequence` (and an alarm),
 * `rig-not-bound` when any event names a foreign rig; nothing of the batch is stored then.
 */
export async function ingestEvents({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<EventUploadAnswer> {
  const actor = authoriseAgent(ctx);
  const upload = parseSpoken(eventUploadSchema, input);
  requireOrder(upload.events);
  const events = someOf(upload.events);
  if (!events) throw new EllwandError('bad-input');
  const last = Math.max(...events.map((event) => event.sequence));
  const { conflict, through } = await inTransaction({ ...ctx, actor }, async (inner) => {
    if (await take(inner, upload, events)) return { conflict: null, through: last };
    const { storedThrough, conflicts } = await judgeReplay(inner, actor.agentId, upload.journalId, events);
    const [sequence] = conflicts;
    if (sequence !== undefined) {
      await tellConflict(inner, events, sequence);
      return { conflict: sequence, through: storedThrough };
    }
    const rest = someOf(events.filter((event) => event.sequence > storedThrough));
    if (rest && !(await take(inner, upload, rest))) throw new EllwandError('changed-meanwhile');
    return { conflict: null, through: Math.max(last, storedThrough) };
  });
  // Thrown outside the transaction, so that its alarm stays.
  if (conflict !== null) throw new EllwandError('event-conflict', { details: { sequence: conflict } });
  return { storedThrough: through };
}
