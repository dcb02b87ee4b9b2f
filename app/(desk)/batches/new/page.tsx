import type { Metadata } from 'next';
import { NewBatch } from '@/components/batches/new-batch';
import { pageContext } from '@/lib/auth/page-context';
import { may } from '@/lib/fleet/rights';
import { listWires } from '@/lib/services/wires/list-wires';
import { create } from '../actions';
import { usualOf } from '../usual';
import { WritersOnly } from '../writers-only';

export const metadata: Metadata = { title: 'New batch' };

export default async function NewBatchPage() {
  const ctx = await pageContext();
  if (!may(ctx.actor.roles, 'batches.write')) return <WritersOnly />;
  const wires = await listWires({ ctx });
  return <NewBatch wires={wires} usual={await usualOf(ctx, wires)} create={create} />;
}
