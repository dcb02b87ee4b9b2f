import { eq } from 'drizzle-orm';
import { z } from 'zod';
import { bags } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import type { BagDto } from '@/lib/schemas/run';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { confirmedBag, selectBagRow } from './bag-rows';

const readBagSchema = z.union([z.object({ runId: z.uuid() }), z.object({ code: z.string().max(40) })]);

/** A confirmed bag as its label says it, by its run or its code. @throws EllwandError `not-found` */
export async function readBag({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<BagDto> {
  authorise(ctx, 'floor.read');
  const asked = parseInput(readBagSchema, input);
  const where = 'runId' in asked ? eq(bags.runId, asked.runId) : eq(bags.code, asked.code.toUpperCase());
  const bag = confirmedBag(await selectBagRow(ctx, where));
  if (!bag) throw new EllwandError('not-found');
  return bag;
}
