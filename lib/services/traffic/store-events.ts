import { sql } from 'drizzle-orm';
import type { AgentEvent } from '@/lib/protocol/events';
import type { ServiceContext } from '../context';
import { rowOf } from './event-row';

/** Pieces that do not count: their run is not on that rig any more, or they are beyond what it asked for. */
export interface SurplusReport {
  rigId: string;
  runId: string;
  /** The highest piece that was reported. */
  piece: number;
}

export interface StoreResult extends Record<string, unknown> {
  /** False: nothing was stored, because the events do not follow on what is stored or name a foreign rig. */
  accepted: boolean;
  surplus: SurplusReport[];
}

/**
 * Stores events that follow on what the journal has stored, and brings counts, wire and blades up to date: all in one
 * statement. Moving the journal's cursor is the claim: two uploads of the same events wait for each other on that row,
 * and the second finds it moved. Charges go to the spool and blade that are in the rig now.
 */
export async function storeEvents(
  ctx: ServiceContext,
  agentId: string,
  journalId: string,
  events: readonly [AgentEvent, ...AgentEvent[]],
): Promise<StoreResult> {
  const first = events[0].sequence;
  const last = first + events.length - 1;
  const { rows } = await ctx.db.execute<StoreResult>(sql`
    with incoming as (
      select * from json_to_recordset(${JSON.stringify(events.map(rowOf))}::json) as e(
        sequence bigint, at timestamptz, kind text, rig_id uuid, run_id uuid, counted integer, closings integer,
        trims integer, wire_mm numeric, closed_at timestamptz, body jsonb)
    ), unbound as (
      select 1 from incoming i
      where i.rig_id is not null
        and not exists (select 1 from rigs g where g.id = i.rig_id and g.agent_id = ${agentId})
    ), moved as (
      update agent_journals set stored_through = ${last}::bigint
      where agent_id = ${agentId} and journal_id = ${journalId} and stored_through = ${first}::bigint - 1
        and not exists (select 1 from unbound)
      returning 1
    ), begun as (
      insert into agent_journals (agent_id, journal_id, stored_through, created_at)
      select ${agentId}::uuid, ${journalId}::uuid, ${last}::bigint, ${ctx.now}::timestamptz
      where ${first}::bigint = 1 and not exists (select 1 from moved) and not exists (select 1 from unbound)
      on conflict do nothing
      returning 1
    ), accepted as (
      select 1 from moved union all select 1 from begun
    ), stored as (
      insert into events (agent_id, journal_id, sequence, rig_id, run_id, kind, at, received_at, body)
      select ${agentId}::uuid, ${journalId}::uuid, sequence, rig_id, run_id, kind, at, ${ctx.now}::timestamptz, body
      from incoming where exists (select 1 from accepted)
      returning sequence
    ), fresh as (
      select i.* from incoming i join stored using (sequence)
    ), per_run as (
      select run_id, rig_id, max(counted) as counted, sum(trims) as trims, sum(wire_mm) as wire_mm,
        max(closed_at) as closed_at
      from fresh where counted is not null or closings > 0 group by run_id, rig_id
    ), progressed as (
      update runs r set
        cut = greatest(r.cut, least(r.pieces, coalesce(p.counted, 0))),
        trims = r.trims + p.trims,
        wire_used_mm = r.wire_used_mm + p.wire_mm,
        last_piece_at = greatest(r.last_piece_at, p.closed_at)
      from per_run p
      where r.id = p.run_id and r.rig_id = p.rig_id and r.state not in ('dropped', 'released', 'cleared')
      returning r.id, r.pieces
    ), per_rig as (
      select rig_id, sum(closings) as closings, sum(wire_mm) as wire_mm
      from fresh where closings > 0 group by rig_id
    ), spooled as (
      update spools s set used_mm = s.used_mm + p.wire_mm
      from per_rig p join rigs g on g.id = p.rig_id where s.id = g.spool_id
    ), bladed as (
      update blades b set cuts = b.cuts + p.closings
      from per_rig p where b.rig_id = p.rig_id and b.removed_at is null
    )
    select exists (select 1 from accepted) as accepted, coalesce((
      select json_agg(json_build_object('rigId', p.rig_id, 'runId', p.run_id, 'piece', p.counted))
      from per_run p left join progressed g on g.id = p.run_id
      where p.counted is not null and (g.id is null or p.counted > g.pieces)
    ), '[]'::json) as surplus`);
  return rows[0] ?? { accepted: false, surplus: [] };
}
