import type { Metadata } from 'next';
import { WorkshopForm } from '@/components/setup/workshop/workshop-form';
import { WorkshopFacts } from '@/components/setup/workshop/workshop-facts';
import { PageHead } from '@/components/ui/page-head';
import { may } from '@/lib/fleet/rights';
import { readWorkshop } from '@/lib/services/workshop/read-workshop';
import { guarded } from '../guarded';
import { changeWorkshop } from './actions';

export const metadata: Metadata = { title: 'Workshop' };

export default function WorkshopPage() {
  return guarded('setup.read', async (ctx) => {
    const workshop = await readWorkshop({ ctx });
    return (
      <>
        <PageHead title="Workshop">What holds for every rig and every batch.</PageHead>
        <div className="page max-w-xl py-6">
          {may(ctx.actor.roles, 'workshop.write') ? (
            <WorkshopForm workshop={workshop} action={changeWorkshop} />
          ) : (
            <WorkshopFacts workshop={workshop} />
          )}
        </div>
      </>
    );
  });
}
