import type { Metadata } from 'next';
import { ageWords } from '@/components/live/time';
import { AgentsView } from '@/components/setup/agents/agents-view';
import { PageHead } from '@/components/ui/page-head';
import { webEnv } from '@/lib/env/web';
import { may } from '@/lib/fleet/rights';
import type { AgentDto } from '@/lib/schemas/setup-agents';
import { listAgents } from '@/lib/services/agents/list-agents';
import { listRigsForSetup } from '@/lib/services/rigs/list-rigs-for-setup';
import { guarded } from '../guarded';
import { addAgent, bindRigs, renewPairingCode, revokeAgent } from './actions';

export const metadata: Metadata = { title: 'Agents' };

const actions = { add: addAgent, bind: bindRigs, renew: renewPairingCode, revoke: revokeAgent };

function heardWords({ lastReportAt }: AgentDto, now: Date): string {
  if (!lastReportAt) return 'never heard';
  return `heard ${ageWords(now.getTime() - Date.parse(lastReportAt))} before this page was made`;
}

export default function AgentsPage() {
  return guarded('setup.read', async (ctx) => {
    const [agents, rigs] = await Promise.all([listAgents({ ctx }), listRigsForSetup({ ctx })]);
    return (
      <>
        <PageHead title="Agents">
          The processes beside the rigs. Each holds a token for its own rigs only.
        </PageHead>
        <AgentsView
          agents={agents}
          heard={Object.fromEntries(agents.map((agent) => [agent.id, heardWords(agent, ctx.now)]))}
          rigs={rigs.map(({ id, name, agentName }) => ({ id, name, agentName }))}
          serverUrl={webEnv().publicUrl}
          mayChange={may(ctx.actor.roles, 'agents.write')}
          actions={actions}
        />
      </>
    );
  });
}
