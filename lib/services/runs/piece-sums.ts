import { eq, sql } from 'drizzle-orm';
import { pieceEntries } from '@/db/schema/runs';
import type { PieceSums } from '@/lib/fleet/counts';
import type { ServiceContext } from '../context';

/** What was taken out of a run's pieces so far. */
export async function pieceSums(ctx: ServiceContext, runId: string): Promise<PieceSums> {
  const of = (kind: 'scrap' | 'sample' | 'doubt') =>
    sql<number>`coalesce(sum(${pieceEntries.pieces}) filter (where ${pieceEntries.kind} = ${kind}), 0)::int`;
  const [sums] = await ctx.db
    .select({ scrapped: of('scrap'), sampled: of('sample'), doubted: of('doubt') })
    .from(pieceEntries)
    .where(eq(pieceEntries.runId, runId));
  return sums ?? { scrapped: 0, sampled: 0, doubted: 0 };
}
