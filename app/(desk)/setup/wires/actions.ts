'use server';

import { action } from '@/lib/http/action';
import { addWire as add } from '@/lib/services/wires/add-wire';

export async function addWire(input: unknown) {
  return action((ctx) => add({ ctx, input }));
}
