import type { Metadata } from 'next';
import { BatchView } from '@/components/batches/batch-view';
import { duplicate, queue, withdraw } from '../actions';
import { batchOfPage } from './batch-of-page';

export const metadata: Metadata = { title: 'Batch' };

export default async function BatchPage({ params }: { params: Promise<unknown> }) {
  const { batch } = await batchOfPage(params);
  return <BatchView initial={batch} actions={{ queue, withdraw, duplicate }} />;
}
