import { redirect } from 'next/navigation';
import type { ReactNode } from 'react';
import { LinkLost } from '@/components/live/link-state';
import { LiveProvider } from '@/components/live/live-provider';
import { type ServerRunActions, RunActionsProvider } from '@/components/runs/run-actions';
import { Head } from '@/components/shell/head';
import { RightsProvider } from '@/components/shell/rights';
import { serviceContext } from '@/lib/auth/context';
import { currentActor } from '@/lib/auth/current-actor';
import { routes } from '@/lib/routes';
import { readWorkshop } from '@/lib/services/workshop/read-workshop';
import * as run from './run-actions';

// A module's own namespace cannot be handed to the browser; its functions can.
const actions: ServerRunActions = { ...run };

/** Everything behind the sign-in: the head, the live link, the rights of the person. */
export default async function DeskLayout({ children }: { children: ReactNode }) {
  const actor = await currentActor();
  if (!actor) redirect(routes.signIn());
  const ctx = serviceContext(actor);
  const workshop = await readWorkshop({ ctx });
  return (
    <LiveProvider timeZone={workshop.timeZone} serverAt={ctx.now.toISOString()}>
      <RightsProvider roles={actor.roles}>
        <RunActionsProvider actions={actions}>
          <a href="#main" className="sr-only focus:not-sr-only focus:absolute focus:bg-sheet focus:p-3">
            To the page
          </a>
          <Head personName={actor.name} />
          <LinkLost />
          <main id="main">{children}</main>
        </RunActionsProvider>
      </RightsProvider>
    </LiveProvider>
  );
}
