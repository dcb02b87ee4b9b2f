import type { Metadata } from 'next';
import { notFound } from 'next/navigation';
import { z } from 'zod';
import { RigSetupView } from '@/components/setup/rigs/rig-setup-view';
import { EllwandError } from '@/lib/errors';
import { may } from '@/lib/fleet/rights';
import type { ServiceContext } from '@/lib/services/context';
import { listBlades } from '@/lib/services/blades/list-blades';
import { readRigSetup } from '@/lib/services/rigs/read-rig-setup';
import { listSpools } from '@/lib/services/spools/list-spools';
import { readWorkshop } from '@/lib/services/workshop/read-workshop';
import { guarded } from '../../guarded';
import {
  fitBlade,
  loadSpool,
  publishNotes,
  publishProfile,
  returnToService,
  takeOutOfService,
} from '../actions';

export const metadata: Metadata = { title: 'Rig' };

const paramsSchema = z.object({ rigId: z.uuid() });
const actions = { fitBlade, loadSpool, publishNotes, publishProfile, returnToService, takeOutOfService };

export default async function RigSetupPage({ params }: { params: Promise<unknown> }) {
  const parsed = paramsSchema.safeParse(await params);
  if (!parsed.success) notFound();
  return guarded('setup.read', async (ctx) => {
    const [page, spools, blades, workshop] = await Promise.all([
      readOrNotFound(ctx, parsed.data),
      listSpools({ ctx }),
      listBlades({ ctx }),
      readWorkshop({ ctx }),
    ]);
    const { roles } = ctx.actor;
    const rights = {
      profile: may(roles, 'profiles.write'),
      notes: may(roles, 'notes.write'),
      load: may(roles, 'rigs.load'),
      blade: may(roles, 'blades.write'),
      service: may(roles, 'rigs.service'),
    };
    const shared = { spools, blades, rights, actions, timeZone: workshop.timeZone };
    return <RigSetupView page={page} {...shared} />;
  });
}

async function readOrNotFound(ctx: ServiceContext, input: { rigId: string }) {
  try {
    return await readRigSetup({ ctx, input });
  } catch (error) {
    if (error instanceof EllwandError && error.code === 'not-found') notFound();
    throw error;
  }
}
