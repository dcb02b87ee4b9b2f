'use client';

import { useState } from 'react';
import type { AgentDto, PairingOfferDto } from '@/lib/schemas/setup-agents';
import { FormChoices, FormText } from '../form/fields';
import { textOf, tickedOf } from '../form/read';
import { SetupForm, type SetupAction } from '../form/setup-form';
import { Rows, Sides } from '../sides';
import { AgentRow } from './agent-row';
import { PairingOffer } from './pairing-offer';

export interface AgentActions {
  add: SetupAction<PairingOfferDto>;
  renew: SetupAction<PairingOfferDto>;
  revoke: SetupAction;
  bind: SetupAction;
}

interface AgentsViewProps {
  agents: AgentDto[];
  /** With the sentence that says when each was last heard; by id. */
  heard: Record<string, string>;
  rigs: { id: string; name: string; agentName: string | null }[];
  serverUrl: string;
  mayChange: boolean;
  actions: AgentActions;
}

/** The agents, and the code of the one that was just added or is to be paired anew. */
export function AgentsView({ agents, heard, rigs, serverUrl, mayChange, actions }: AgentsViewProps) {
  const [offer, setOffer] = useState<PairingOfferDto | null>(null);
  const offered = agents.find(({ id }) => id === offer?.agentId);
  return (
    <>
      {offer ? (
        <div className="page pt-6">
          <PairingOffer
            offer={offer}
            rigNames={offered?.rigs.map(({ name }) => name) ?? []}
            serverUrl={serverUrl}
          />
        </div>
      ) : null}
      <Sides
        list={
          <Rows
            label="Agents"
            none="No agent yet. It is the small process beside the rigs, on their computer."
          >
            {agents.map((agent) => (
              <AgentRow
                key={agent.id}
                agent={agent}
                heard={heard[agent.id] ?? ''}
                rigs={rigs}
                mayChange={mayChange}
                actions={actions}
                onOffer={setOffer}
              />
            ))}
          </Rows>
        }
        form={mayChange ? <AddAgent rigs={rigs} add={actions.add} onOffer={setOffer} /> : null}
      />
    </>
  );
}

function AddAgent({
  rigs,
  add,
  onOffer,
}: {
  rigs: AgentsViewProps['rigs'];
  add: AgentActions['add'];
  onOffer: (offer: PairingOfferDto) => void;
}) {
  const free = rigs.filter((rig) => rig.agentName === null);
  return (
    <SetupForm
      action={add}
      read={(form) => ({ name: textOf(form, 'name'), rigIds: tickedOf(form, 'rigIds') })}
      submit="Add and show the code"
      done="Added. The code stands above."
      onDone={onOffer}
      clears
    >
      <h2 className="text-xl">Add an agent</h2>
      <FormText path="name" label="Name" hint="Which computer it runs on." />
      {free.length > 0 ? (
        <FormChoices
          path="rigIds"
          legend="Rigs on its USB ports"
          choices={free.map(({ id, name }) => ({ value: id, label: name }))}
        />
      ) : (
        <p className="text-soft">Every rig has an agent already.</p>
      )}
    </SetupForm>
  );
}
