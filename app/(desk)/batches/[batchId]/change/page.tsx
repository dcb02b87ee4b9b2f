import type { Metadata } from 'next';
import { redirect } from 'next/navigation';
import { ChangeBatch } from '@/components/batches/change-batch';
import { may } from '@/lib/fleet/rights';
import { routes } from '@/lib/routes';
import { listWires } from '@/lib/services/wires/list-wires';
import { usualOf } from '../../usual';
import { change } from '../../actions';
import { WritersOnly } from '../../writers-only';
import { batchOfPage } from '../batch-of-page';

export const metadata: Metadata = { title: 'Change a batch' };

export default async function ChangeBatchPage({ params }: { params: Promise<unknown> }) {
  const { ctx, batch } = await batchOfPage(params);
  if (!may(ctx.actor.roles, 'batches.write')) return <WritersOnly />;
  if (batch.state === 'withdrawn') redirect(routes.batch(batch.id));
  const wires = await listWires({ ctx });
  return <ChangeBatch batch={batch} wires={wires} usual={await usualOf(ctx, wires)} change={change} />;
}
