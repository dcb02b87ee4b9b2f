import { redirect } from 'next/navigation';
import { routes } from '@/lib/routes';
import type { PersonActor, ServiceContext } from '@/lib/services/context';
import { serviceContext } from './context';
import { currentActor } from './current-actor';

/** The service context of a signed-in page; sends everybody else to the sign-in. */
export async function pageContext(): Promise<ServiceContext<PersonActor>> {
  const actor = await currentActor();
  if (!actor) redirect(routes.signIn());
  return serviceContext(actor);
}
