'use server';

import { action } from '@/lib/http/action';
import { fitBlade as fit } from '@/lib/services/blades/fit-blade';
import { addRig as add } from '@/lib/services/rigs/add-rig';
import { publishNotes as notes } from '@/lib/services/rigs/publish-notes';
import { publishProfile as profile } from '@/lib/services/rigs/publish-profile';
import { returnToService as bringBack } from '@/lib/services/rigs/return-to-service';
import { takeOutOfService as takeOut } from '@/lib/services/rigs/take-out-of-service';
import { loadSpool as load } from '@/lib/services/spools/load-spool';

export async function addRig(input: unknown) {
  return action((ctx) => add({ ctx, input }));
}
export async function publishProfile(input: unknown) {
  return action((ctx) => profile({ ctx, input }));
}
export async function publishNotes(input: unknown) {
  return action((ctx) => notes({ ctx, input }));
}
export async function loadSpool(input: unknown) {
  return action((ctx) => load({ ctx, input }));
}
export async function fitBlade(input: unknown) {
  return action((ctx) => fit({ ctx, input }));
}
export async function takeOutOfService(input: unknown) {
  return action((ctx) => takeOut({ ctx, input }));
}
export async function returnToService(input: unknown) {
  return action((ctx) => bringBack({ ctx, input }));
}
