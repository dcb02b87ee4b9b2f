'use server';

import { action } from '@/lib/http/action';
import { changeBatch } from '@/lib/services/batches/change-batch';
import { createBatch } from '@/lib/services/batches/create-batch';
import { duplicateBatch } from '@/lib/services/batches/duplicate-batch';
import { queueBatch } from '@/lib/services/batches/queue-batch';
import { withdrawBatch } from '@/lib/services/batches/withdraw-batch';

export async function create(input: unknown) {
  return action((ctx) => createBatch({ ctx, input }));
}
export async function change(input: unknown) {
  return action((ctx) => changeBatch({ ctx, input }));
}
export async function queue(input: unknown) {
  return action((ctx) => queueBatch({ ctx, input }));
}
export async function duplicate(input: unknown) {
  return action((ctx) => duplicateBatch({ ctx, input }));
}
export async function withdraw(input: unknown) {
  return action((ctx) => withdrawBatch({ ctx, input }));
}
