import type { Metadata } from 'next';
import { AddRig } from '@/components/setup/rigs/add-rig';
import { RigRows } from '@/components/setup/rigs/rig-rows';
import { Sides } from '@/components/setup/sides';
import { PageHead } from '@/components/ui/page-head';
import { may } from '@/lib/fleet/rights';
import { listRigsForSetup } from '@/lib/services/rigs/list-rigs-for-setup';
import { guarded } from '../guarded';
import { addRig } from './actions';

export const metadata: Metadata = { title: 'Rigs' };

export default function RigsPage() {
  return guarded('setup.read', async (ctx) => {
    const rigs = await listRigsForSetup({ ctx });
    const nextPlace = Math.max(0, ...rigs.map((rig) => rig.benchOrder)) + 1;
    const mayAdd = may(ctx.actor.roles, 'rigs.write');
    return (
      <>
        <PageHead title="Rigs">Cutting machines, in the order in which they stand.</PageHead>
        <Sides
          list={<RigRows rigs={rigs} />}
          form={mayAdd ? <AddRig nextPlace={nextPlace} action={addRig} /> : null}
        />
      </>
    );
  });
}
