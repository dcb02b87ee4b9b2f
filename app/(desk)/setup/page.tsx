import { Overview } from '@/components/setup/overview';
import { listAgents } from '@/lib/services/agents/list-agents';
import { listRigsForSetup } from '@/lib/services/rigs/list-rigs-for-setup';
import { listSpools } from '@/lib/services/spools/list-spools';
import { listWires } from '@/lib/services/wires/list-wires';
import { readWorkshop } from '@/lib/services/workshop/read-workshop';
import { guarded } from './guarded';

export default function SetupPage() {
  return guarded('setup.read', async (ctx) => {
    const [workshop, wires, spools, rigs, agents] = await Promise.all([
      readWorkshop({ ctx }),
      listWires({ ctx }),
      listSpools({ ctx }),
      listRigsForSetup({ ctx }),
      listAgents({ ctx }),
    ]);
    const counts = { wires: wires.length, spools: spools.length };
    return <Overview workshopName={workshop.name} counts={counts} rigs={rigs} agents={agents} />;
  });
}
