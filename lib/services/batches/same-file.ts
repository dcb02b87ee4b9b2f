import { createHash } from 'node:crypto';
import { desc, eq } from 'drizzle-orm';
import { batches } from '@/db/schema/batches';
import type { SameFile } from '@/lib/schemas/upload';
import type { ServiceContext } from '../context';

/** What tells one file from another, whatever it is called. */
export function fileDigest(bytes: Uint8Array): string {
  return createHash('sha256').update(bytes).digest('hex');
}

/** The newest batch that was made of this very file, or null. */
export async function findSameFile(ctx: ServiceContext, sha256: string): Promise<SameFile | null> {
  const [batch] = await ctx.db
    .select()
    .from(batches)
    .where(eq(batches.sourceSha256, sha256))
    .orderBy(desc(batches.number))
    .limit(1);
  if (!batch) return null;
  const { id: batchId, number, name, createdAt } = batch;
  return { batchId, number, name, createdAt: createdAt.toISOString() };
}
