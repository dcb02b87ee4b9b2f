'use client';

import { LEAST_AGENT_VERSION } from '@/lib/protocol/version';
import type { AgentDto, PairingOfferDto } from '@/lib/schemas/setup-agents';
import { FormChoices } from '../form/fields';
import { tickedOf } from '../form/read';
import { SetupForm } from '../form/setup-form';
import { Opened, Row } from '../sides';
import type { AgentActions } from './agents-view';

const PAIRING_WORDS: Record<AgentDto['pairing'], string> = {
  paired: 'Paired',
  waiting: 'Waits for its code to be used',
  'no code': 'Not paired, and its code is too old',
  revoked: 'Revoked',
};

interface AgentRowProps {
  agent: AgentDto;
  heard: string;
  rigs: { id: string; name: string; agentName: string | null }[];
  mayChange: boolean;
  actions: AgentActions;
  onOffer: (offer: PairingOfferDto) => void;
}

/** One agent, its rigs, and what an owner can change. */
export function AgentRow({ agent, heard, rigs, mayChange, actions, onOffer }: AgentRowProps) {
  return (
    <Row name={agent.name}>
      <p>
        {PAIRING_WORDS[agent.pairing]}
        {heard ? `, ${heard}` : ''}
      </p>
      <SoftwareLine agent={agent} />
      <p className="text-soft">{agent.rigs.map(({ name }) => name).join(', ') || 'serves no rig'}</p>
      {mayChange ? (
        <Opened title={`Change ${agent.name}`}>
          <BindRigs agent={agent} rigs={rigs} bind={actions.bind} />
          <SetupForm
            action={actions.renew}
            read={() => ({ agentId: agent.id })}
            submit="Make a new pairing code"
            done="The code stands above."
            look="plain"
            onDone={onOffer}
          />
          {agent.pairing === 'revoked' ? null : (
            <SetupForm
              action={actions.revoke}
              read={() => ({ agentId: agent.id })}
              submit="Revoke its token"
              done="Revoked."
              look="signal"
            >
              <p>A run that it has begun goes on at the rig without us. Go and stop it there if you must.</p>
            </SetupForm>
          )}
        </Opened>
      ) : null}
    </Row>
  );
}

function SoftwareLine({ agent: { software, tooOld } }: Pick<AgentRowProps, 'agent'>) {
  if (software === null) return null;
  if (!tooOld) return <p className="text-soft">{software}</p>;
  return (
    <p className="flex items-center gap-2">
      <span aria-hidden className="hatch h-4 w-6 shrink-0" />
      {software} is too old: it starts no run. Put version {LEAST_AGENT_VERSION} or newer in its place.
    </p>
  );
}

function BindRigs({
  agent,
  rigs,
  bind,
}: Pick<AgentRowProps, 'agent' | 'rigs'> & { bind: AgentActions['bind'] }) {
  const own = agent.rigs.map(({ id }) => id);
  return (
    <SetupForm
      key={own.join()}
      action={bind}
      read={(form) => ({ agentId: agent.id, rigIds: tickedOf(form, 'rigIds') })}
      submit="Save its rigs"
      done="Saved. It reads them now."
      look="plain"
    >
      <FormChoices
        path="rigIds"
        legend="Rigs on its USB ports"
        chosen={own}
        choices={rigs.map(({ id, name, agentName }) => ({
          value: id,
          label: name,
          hint: agentName && agentName !== agent.name ? `now on ${agentName}` : '',
        }))}
      />
    </SetupForm>
  );
}
