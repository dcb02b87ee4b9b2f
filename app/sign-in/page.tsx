import type { Metadata } from 'next';
import { redirect } from 'next/navigation';
import { Gate } from '@/components/entry/gate';
import { SignInForm } from '@/components/entry/sign-in-form';
import { systemContext } from '@/lib/auth/context';
import { currentActor } from '@/lib/auth/current-actor';
import { routes } from '@/lib/routes';
import { workshopIsEmpty } from '@/lib/services/people/workshop-is-empty';

export const metadata: Metadata = { title: 'Sign in' };

/** An empty workshop has nobody to sign in: its first owner comes first. */
export default async function SignInPage() {
  if (await currentActor()) redirect(routes.floor());
  if (await workshopIsEmpty({ ctx: systemContext() })) redirect(routes.firstOwner());
  return (
    <Gate title="Sign in">
      <SignInForm next={routes.floor()} />
    </Gate>
  );
}
