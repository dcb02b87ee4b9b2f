import { and, eq, inArray, sql } from 'drizzle-orm';
import { agentJournals, rigs } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import type { AgentEvent } from '@/lib/protocol/events';
import type { ServiceContext } from '../context';
import { rowOf } from './event-row';

/** Sequences whose stored content is another than what was sent now. */
async function conflictsOf(
  ctx: ServiceContext,
  agentId: string,
  journalId: string,
  replayed: readonly AgentEvent[],
): Promise<number[]> {
  const { rows } = await ctx.db.execute<{ sequence: string }>(sql`
    select i.sequence
    from json_to_recordset(${JSON.stringify(replayed.map(rowOf))}::json)
      as i(sequence bigint, at timestamptz(3), body jsonb)
    left join events e
      on e.agent_id = ${agentId} and e.journal_id = ${journalId} and e.sequence = i.sequence
    where e.at is distinct from i.at or e.body is distinct from i.body
    order by i.sequence`);
  return rows.map((row) => Number(row.sequence));
}

async function requireBound(ctx: ServiceContext, agentId: string, events: readonly AgentEvent[]) {
  const named = [...new Set(events.flatMap(({ body }) => ('rigId' in body ? [body.rigId] : [])))];
  const bound = named.length
    ? await ctx.db
        .select({ id: rigs.id })
        .from(rigs)
        .where(and(inArray(rigs.id, named), eq(rigs.agentId, agentId)))
    : [];
  const known = new Set(bound.map((rig) => rig.id));
  const foreign = named.find((rigId) => !known.has(rigId));
  if (foreign) throw new EllwandError('rig-not-bound', { details: { rigId: foreign } });
}

/** What is left to do for an upload that does not simply follow on. `conflicts`: refuse, and tell somebody. */
export interface Replay {
  storedThrough: number;
  conflicts: number[];
}

/**
 * Looks at an upload that could not be stored as it came: a replay, in part or whole, or none.
 * @throws EllwandError `rig-not-bound` for a foreign rig, `journal-gap` with `expected` when events are missing.
 */
export async function judgeReplay(
  ctx: ServiceContext,
  agentId: string,
  journalId: string,
  events: readonly [AgentEvent, ...AgentEvent[]],
): Promise<Replay> {
  await requireBound(ctx, agentId, events);
  const [journal] = await ctx.db
    .select({ storedThrough: agentJournals.storedThrough })
    .from(agentJournals)
    .where(and(eq(agentJournals.agentId, agentId), eq(agentJournals.journalId, journalId)))
    .for('update');
  const storedThrough = journal?.storedThrough ?? 0;
  if (events[0].sequence > storedThrough + 1) {
    throw new EllwandError('journal-gap', { details: { expected: storedThrough + 1 } });
  }
  const replayed = events.filter((event) => event.sequence <= storedThrough);
  return { storedThrough, conflicts: await conflictsOf(ctx, agentId, journalId, replayed) };
}

/** @throws EllwandError `journal-gap` unless each event's sequence is one above the last one's. */
export function requireOrder(events: readonly AgentEvent[]): void {
  events.forEach((event, index) => {
    const before = events[index - 1];
    if (before && event.sequence !== before.sequence + 1) {
      throw new EllwandError('journal-gap', { details: { expected: before.sequence + 1 } });
    }
  });
}
