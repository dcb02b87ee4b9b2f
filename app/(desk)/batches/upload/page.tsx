import type { Metadata } from 'next';
import { redirect } from 'next/navigation';
import { UploadView } from '@/components/batches/upload-view';
import { pageContext } from '@/lib/auth/page-context';
import { may } from '@/lib/fleet/rights';
import { routes } from '@/lib/routes';

export const metadata: Metadata = { title: 'Upload a cut list' };

export default async function UploadPage() {
  const ctx = await pageContext();
  if (!may(ctx.actor.roles, 'batches.write')) redirect(routes.batches());
  return <UploadView />;
}
