import type { Metadata } from 'next';
import { UploadView } from '@/components/batches/upload-view';
import { pageContext } from '@/lib/auth/page-context';
import { may } from '@/lib/fleet/rights';
import { WritersOnly } from '../writers-only';

export const metadata: Metadata = { title: 'Upload a cut list' };

export default async function UploadPage() {
  const ctx = await pageContext();
  if (!may(ctx.actor.roles, 'batches.write')) return <WritersOnly />;
  return <UploadView />;
}
