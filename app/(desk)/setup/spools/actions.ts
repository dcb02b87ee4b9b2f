'use server';

import { action } from '@/lib/http/action';
import { addSpool as add } from '@/lib/services/spools/add-spool';
import { endSpool as end } from '@/lib/services/spools/end-spool';

export async function addSpool(input: unknown) {
  return action((ctx) => add({ ctx, input }));
}
export async function endSpool(input: unknown) {
  return action((ctx) => end({ ctx, input }));
}
