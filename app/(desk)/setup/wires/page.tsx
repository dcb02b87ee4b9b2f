import type { Metadata } from 'next';
import { Sides } from '@/components/setup/sides';
import { AddWire } from '@/components/setup/stock/add-wire';
import { WireRows } from '@/components/setup/stock/wire-rows';
import { PageHead } from '@/components/ui/page-head';
import { may } from '@/lib/fleet/rights';
import { listWires } from '@/lib/services/wires/list-wires';
import { guarded } from '../guarded';
import { addWire } from './actions';

export const metadata: Metadata = { title: 'Wires' };

export default function WiresPage() {
  return guarded('setup.read', async (ctx) => {
    const wires = await listWires({ ctx });
    const mayAdd = may(ctx.actor.roles, 'wires.write');
    return (
      <>
        <PageHead title="Wires">
          Kinds of wire. What lies on a shelf or a rig is a spool of one of them.
        </PageHead>
        <Sides list={<WireRows wires={wires} />} form={mayAdd ? <AddWire action={addWire} /> : null} />
      </>
    );
  });
}
