'use server';

import { openAction } from '@/lib/http/action';
import { createFirstOwner as create } from '@/lib/services/people/create-first-owner';

export async function createFirstOwner(input: unknown) {
  return openAction((ctx) => create({ ctx, input }));
}
