import { unstable_rethrow } from 'next/navigation';
import { newRequestId, serviceContext, systemContext } from '@/lib/auth/context';
import { currentActor } from '@/lib/auth/current-actor';
import { EllwandError } from '@/lib/errors';
import type { ActionResult } from '@/lib/schemas/action-result';
import type { PersonActor, ServiceContext, SystemActor } from '@/lib/services/context';
import { problemOf } from './problem';

/** The body of a server action of a signed-in person: errors come back as codes, never thrown at the page. */
export function action<Data>(
  work: (ctx: ServiceContext<PersonActor>) => Promise<Data>,
): Promise<ActionResult<Data>> {
  return answered(async (requestId) => {
    const actor = await currentActor();
    if (!actor) throw new EllwandError('not-signed-in');
    return work(serviceContext(actor, requestId));
  });
}

/** The same for the one form that is filled in before anybody can sign in: the first owner's. */
export function openAction<Data>(
  work: (ctx: ServiceContext<SystemActor>) => Promise<Data>,
): Promise<ActionResult<Data>> {
  return answered((requestId) => work(systemContext(requestId)));
}

async function answered<Data>(work: (requestId: string) => Promise<Data>): Promise<ActionResult<Data>> {
  const requestId = newRequestId();
  try {
    return { ok: true, data: await work(requestId) };
  } catch (error) {
    // The framework's own signals, such as a redirect, are no errors.
    unstable_rethrow(error);
    const { code, title, fields } = problemOf(error, requestId);
    return { ok: false, code, title, fields, requestId };
  }
}
