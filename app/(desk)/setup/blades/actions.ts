'use server';

import { action } from '@/lib/http/action';
import { addBlade as add } from '@/lib/services/blades/add-blade';
import { fitBlade as fit } from '@/lib/services/blades/fit-blade';
import { removeBlade as remove } from '@/lib/services/blades/remove-blade';

export async function addBlade(input: unknown) {
  return action((ctx) => add({ ctx, input }));
}
export async function fitBlade(input: unknown) {
  return action((ctx) => fit({ ctx, input }));
}
export async function removeBlade(input: unknown) {
  return action((ctx) => remove({ ctx, input }));
}
