import type { Metadata } from 'next';
import { FloorView } from '@/components/floor/floor-view';
import { pageContext } from '@/lib/auth/page-context';
import { readFloor } from '@/lib/services/floor/read-floor';

export const metadata: Metadata = { title: 'Floor' };

export default async function FloorPage() {
  const ctx = await pageContext();
  return <FloorView initial={await readFloor({ ctx })} />;
}
