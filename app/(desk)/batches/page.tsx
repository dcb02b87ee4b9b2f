import type { Metadata } from 'next';
import { BatchListView } from '@/components/batches/batch-list';
import { pageContext } from '@/lib/auth/page-context';
import { batchListSchema } from '@/lib/schemas/batch-list';
import { listBatches } from '@/lib/services/batches/list-batches';
import { listWires } from '@/lib/services/wires/list-wires';

export const metadata: Metadata = { title: 'Batches' };

export default async function BatchesPage({
  searchParams,
}: {
  searchParams: Promise<Record<string, unknown>>;
}) {
  const list = batchListSchema.parse(await searchParams);
  const ctx = await pageContext();
  const [page, wires] = await Promise.all([listBatches({ ctx, input: list }), listWires({ ctx })]);
  return <BatchListView list={list} initial={page} wires={wires} />;
}
