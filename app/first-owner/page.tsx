import type { Metadata } from 'next';
import { redirect } from 'next/navigation';
import { FirstOwnerForm } from '@/components/entry/first-owner-form';
import { Gate } from '@/components/entry/gate';
import { systemContext } from '@/lib/auth/context';
import { routes } from '@/lib/routes';
import { workshopIsEmpty } from '@/lib/services/people/workshop-is-empty';
import { createFirstOwner } from './actions';

export const metadata: Metadata = { title: 'The first owner' };
// Asked anew each time: a page made at build time would stay open for ever.
export const dynamic = 'force-dynamic';

/** Stands open only while nobody belongs to the workshop. */
export default async function FirstOwnerPage() {
  if (!(await workshopIsEmpty({ ctx: systemContext() }))) redirect(routes.signIn());
  return (
    <Gate title="An empty workshop">
      <p>You are the first here, so you become its owner. You add people, wires, rigs and agents next.</p>
      <FirstOwnerForm action={createFirstOwner} setupUrl={routes.setup()} signInUrl={routes.signIn()} />
    </Gate>
  );
}
