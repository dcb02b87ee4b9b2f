'use server';

import { action } from '@/lib/http/action';
import { changeWorkshop as change } from '@/lib/services/workshop/change-workshop';

export async function changeWorkshop(input: unknown) {
  return action((ctx) => change({ ctx, input }));
}
