'use server';

import { action } from '@/lib/http/action';
import { addAgent as add } from '@/lib/services/agents/add-agent';
import { bindRigs as bind } from '@/lib/services/agents/bind-rigs';
import { renewPairingCode as renew } from '@/lib/services/agents/renew-pairing-code';
import { revokeAgent as revoke } from '@/lib/services/agents/revoke-agent';

export async function addAgent(input: unknown) {
  return action((ctx) => add({ ctx, input }));
}
export async function bindRigs(input: unknown) {
  return action((ctx) => bind({ ctx, input }));
}
export async function renewPairingCode(input: unknown) {
  return action((ctx) => renew({ ctx, input }));
}
export async function revokeAgent(input: unknown) {
  return action((ctx) => revoke({ ctx, input }));
}
