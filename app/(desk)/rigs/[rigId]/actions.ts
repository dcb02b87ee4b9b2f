'use server';

import { action } from '@/lib/http/action';
import { loadSpool as load } from '@/lib/services/spools/load-spool';

export async function loadSpool(input: unknown) {
  return action((ctx) => load({ ctx, input }));
}
