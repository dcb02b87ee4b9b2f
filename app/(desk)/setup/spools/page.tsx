import type { Metadata } from 'next';
import { Sides } from '@/components/setup/sides';
import { AddSpool } from '@/components/setup/stock/add-spool';
import { SpoolRows } from '@/components/setup/stock/spool-rows';
import { PageHead } from '@/components/ui/page-head';
import { listSpools } from '@/lib/services/spools/list-spools';
import { listWires } from '@/lib/services/wires/list-wires';
import { guarded } from '../guarded';
import { addSpool, endSpool } from './actions';

export const metadata: Metadata = { title: 'Spools' };

export default function SpoolsPage() {
  return guarded('setup.read', async (ctx) => {
    const [spools, wires] = await Promise.all([listSpools({ ctx }), listWires({ ctx })]);
    return (
      <>
        <PageHead title="Spools">Reels of wire, with what is left on each.</PageHead>
        <Sides
          list={<SpoolRows spools={spools} end={endSpool} />}
          form={<AddSpool wires={wires} action={addSpool} />}
        />
      </>
    );
  });
}
