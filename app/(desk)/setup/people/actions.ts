'use server';

import { action } from '@/lib/http/action';
import { addPerson as add } from '@/lib/services/people/add-person';
import { changeRoles as change } from '@/lib/services/people/change-roles';
import { disablePerson as disable } from '@/lib/services/people/disable-person';
import { enablePerson as enable } from '@/lib/services/people/enable-person';
import { setPassword as set } from '@/lib/services/people/set-password';

export async function addPerson(input: unknown) {
  return action((ctx) => add({ ctx, input }));
}
export async function changeRoles(input: unknown) {
  return action((ctx) => change({ ctx, input }));
}
export async function disablePerson(input: unknown) {
  return action((ctx) => disable({ ctx, input }));
}
export async function enablePerson(input: unknown) {
  return action((ctx) => enable({ ctx, input }));
}
export async function setPassword(input: unknown) {
  return action((ctx) => set({ ctx, input }));
}
