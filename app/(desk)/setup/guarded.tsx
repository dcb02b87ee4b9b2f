import type { ReactNode } from 'react';
import { Notice } from '@/components/ui/notice';
import { pageContext } from '@/lib/auth/page-context';
import { ERRORS } from '@/lib/errors';
import { may, type Right } from '@/lib/fleet/rights';
import type { PersonActor, ServiceContext } from '@/lib/services/context';

/** A page for those who hold the right; anybody else is told so in place of it. The services check again. */
export async function guarded(
  right: Right,
  view: (ctx: ServiceContext<PersonActor>) => Promise<ReactNode>,
): Promise<ReactNode> {
  const ctx = await pageContext();
  if (may(ctx.actor.roles, right)) return view(ctx);
  return (
    <div className="page py-6">
      <Notice title={ERRORS['not-allowed'].title} danger />
    </div>
  );
}
