import { auditEntries } from '@/db/schema/people';
import type { ServiceContext } from './context';

/** Writes who did what to what; part of the caller's transaction. `subject` as in `batch:4711…`. */
export async function audit(
  ctx: ServiceContext,
  verb: string,
  subject: string,
  details: Record<string, unknown> = {},
): Promise<void> {
  await ctx.db.insert(auditEntries).values({
    at: ctx.now,
    personId: ctx.actor.kind === 'person' ? ctx.actor.personId : null,
    agentId: ctx.actor.kind === 'agent' ? ctx.actor.agentId : null,
    verb,
    subject,
    requestId: ctx.requestId,
    details,
  });
}
