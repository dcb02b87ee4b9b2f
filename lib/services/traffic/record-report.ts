import { eq, sql } from 'drizzle-orm';
import { agents } from '@/db/schema/rigs';
import { isNews, onServerClock } from '@/lib/fleet/report-change';
import { comesFree } from '@/lib/plan/comes-free';
import { type Report, type ReportAnswer, reportSchema, type RigReport } from '@/lib/protocol/report';
import { authoriseAgent } from '../authorise';
import type { AgentActor, ServiceContext } from '../context';
import { endAlarms } from '../alarms/end-alarms';
import { causes, tell } from '../tell';
import { inTransaction } from '../transaction';
import { parseSpoken } from './parse-spoken';

interface Stored extends Record<string, unknown> {
  rigId: string;
  before: RigReport | null;
  heardBeforeMs: number | null;
}

/**
 * Overwrites what is known of the agent's rigs, in one statement. A rig counts as heard only while its port is open:
 * `heard_at` is that moment, and `connected_at` stays empty until the port was open once. Rigs that are not bound to
 * the agent are left out.
 */
async function store(ctx: ServiceContext, actor: AgentActor, report: Report, skewMs: number) {
  const rows = report.rigs.map((rig) => ({ rigId: rig.rigId, report: onServerClock(rig, skewMs) }));
  const { rows: stored } = await ctx.db.execute<Stored>(sql`
    with incoming as (
      select g.id as rig_id, i.report, i.report->>'port' = 'open' as open
      from json_to_recordset(${JSON.stringify(rows)}::json) as i("rigId" uuid, report jsonb)
      join rigs g on g.id = i."rigId" and g.agent_id = ${actor.agentId}
    ), before as (
      select b.* from rig_reports b join incoming i on i.rig_id = b.rig_id
    ), written as (
      insert into rig_reports as r (rig_id, heard_at, connected_at, report)
      select rig_id, ${ctx.now}::timestamptz, case when open then ${ctx.now}::timestamptz end, report from incoming
      on conflict (rig_id) do update set
        report = excluded.report,
        heard_at = case when excluded.connected_at is null then r.heard_at else excluded.heard_at end,
        connected_at = case
          when excluded.connected_at is null or r.report->>'port' = 'open' then r.connected_at
          else excluded.connected_at end
    )
    select i.rig_id as "rigId", b.report as before,
      (extract(epoch from b.heard_at) * 1000)::float8 as "heardBeforeMs"
    from incoming i left join before b on b.rig_id = i.rig_id`);
  return new Map(stored.map((row) => [row.rigId, row]));
}

/** Takes an agent's report; tells screens only what they show, and ends the silence of the rigs in it. */
export async function recordReport({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<ReportAnswer> {
  const actor = authoriseAgent(ctx);
  const report = parseSpoken(reportSchema, input);
  const skewMs = ctx.now.getTime() - Date.parse(report.sentAt);
  await inTransaction(ctx, async (inner) => {
    const known = await store(inner, actor, report, skewMs);
    await inner.db
      .update(agents)
      .set({ lastReportAt: inner.now, software: report.software })
      .where(eq(agents.id, actor.agentId));
    const heard = report.rigs.filter((rig) => rig.port === 'open' && known.has(rig.rigId));
    await endAlarms(inner, { rigIds: heard.map((rig) => rig.rigId), kinds: ['rig silent'] });
    let freed = false;
    for (const rig of report.rigs) {
      const row = known.get(rig.rigId);
      if (!row) continue;
      const last =
        row.before && row.heardBeforeMs !== null
          ? { report: row.before, heardAtMs: row.heardBeforeMs }
          : null;
      if (isNews(last, rig, inner.now.getTime())) await tell(inner, { news: 'rig', rigId: rig.rigId });
      freed ||= comesFree(last, rig, inner.now.getTime());
    }
    if (freed) await causes(inner, { topic: 'dispatch', payload: { because: 'rig heard' } });
  });
  return { serverAt: ctx.now.toISOString() };
}
