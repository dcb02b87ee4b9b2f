import type { Metadata } from 'next';
import { notFound } from 'next/navigation';
import { z } from 'zod';
import { RigView } from '@/components/rig/rig-view';
import { pageContext } from '@/lib/auth/page-context';
import { readRigPage } from '@/lib/services/floor/read-rig-page';
import { listSpools } from '@/lib/services/spools/list-spools';
import { loadSpool } from './actions';

export const metadata: Metadata = { title: 'Rig' };

const paramsSchema = z.object({ rigId: z.uuid() });

export default async function RigPage({ params }: { params: Promise<unknown> }) {
  const parsed = paramsSchema.safeParse(await params);
  if (!parsed.success) notFound();
  const ctx = await pageContext();
  const [page, spools] = await Promise.all([readRigPage({ ctx, input: parsed.data }), listSpools({ ctx })]);
  return <RigView initial={page} personId={ctx.actor.personId} spools={spools} load={loadSpool} />;
}
