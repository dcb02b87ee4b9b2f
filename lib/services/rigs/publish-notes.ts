import { eq, max } from 'drizzle-orm';
import { interlockNotes } from '@/db/schema/rigs';
import { publishNotesSchema } from '@/lib/schemas/setup-rigs';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { causes, tell } from '../tell';
import { inTransaction } from '../transaction';
import { lockRig } from './lock-rig';

/** Puts new interlock notes in force as their next version; everybody reads them in full before their next start. */
export async function publishNotes({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<{ version: number }> {
  const { personId } = authorise(ctx, 'notes.write');
  const { rigId, points, fullText } = parseInput(publishNotesSchema, input);
  return inTransaction(ctx, async (inner) => {
    await lockRig(inner, rigId);
    const [last] = await inner.db
      .select({ version: max(interlockNotes.version) })
      .from(interlockNotes)
      .where(eq(interlockNotes.rigId, rigId));
    const version = (last?.version ?? 0) + 1;
    await inner.db
      .insert(interlockNotes)
      .values({ rigId, version, points, fullText, createdBy: personId, createdAt: ctx.now });
    await audit(inner, 'notes.publish', `rig:${rigId}`, { version });
    await tell(inner, { news: 'rig', rigId });
    await causes(inner, { topic: 'dispatch', payload: { because: 'notes published' } });
    return { version };
  });
}
