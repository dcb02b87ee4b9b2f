import type { Metadata } from 'next';
import { Sides } from '@/components/setup/sides';
import { AddBlade } from '@/components/setup/stock/add-blade';
import { BladeRows } from '@/components/setup/stock/blade-rows';
import { PageHead } from '@/components/ui/page-head';
import { may } from '@/lib/fleet/rights';
import { listBlades } from '@/lib/services/blades/list-blades';
import { listRigsForSetup } from '@/lib/services/rigs/list-rigs-for-setup';
import { guarded } from '../guarded';
import { addBlade, fitBlade, removeBlade } from './actions';

export const metadata: Metadata = { title: 'Blades' };

export default function BladesPage() {
  return guarded('setup.read', async (ctx) => {
    const [blades, rigs] = await Promise.all([listBlades({ ctx }), listRigsForSetup({ ctx })]);
    const mayChange = may(ctx.actor.roles, 'blades.write');
    const bench = {
      rigs: rigs.map(({ id, name }) => ({ id, name })),
      actions: { fit: fitBlade, remove: removeBlade },
      mayChange,
    };
    return (
      <>
        <PageHead title="Blades">One physical cutter each, from fitting to removal.</PageHead>
        <Sides
          list={<BladeRows blades={blades} {...bench} />}
          form={mayChange ? <AddBlade action={addBlade} /> : null}
        />
      </>
    );
  });
}
