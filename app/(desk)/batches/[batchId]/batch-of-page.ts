import { notFound } from 'next/navigation';
import { pageContext } from '@/lib/auth/page-context';
import { EllwandError } from '@/lib/errors';
import { oneBatchSchema } from '@/lib/schemas/batches';
import { readBatch } from '@/lib/services/batches/read-batch';

/** The batch that a page's path names, and who asks; a page of its own says when there is none. */
export async function batchOfPage(params: Promise<unknown>) {
  const parsed = oneBatchSchema.safeParse(await params);
  if (!parsed.success) notFound();
  const ctx = await pageContext();
  try {
    return { ctx, batch: await readBatch({ ctx, input: parsed.data }) };
  } catch (error) {
    if (error instanceof EllwandError && error.code === 'not-found') notFound();
    throw error;
  }
}
