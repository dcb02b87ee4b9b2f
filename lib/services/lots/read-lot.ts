import { eq } from 'drizzle-orm';
import { z } from 'zod';
import { lots } from '@/db/schema/batches';
import { EllwandError } from '@/lib/errors';
import type { LotDto } from '@/lib/schemas/batches';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { selectLots } from './lot-rows';

const inputSchema = z.object({ lotId: z.uuid() });

/** One lot with its counts. @throws EllwandError `not-found` */
export async function readLot({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<LotDto> {
  authorise(ctx, 'batches.read');
  const { lotId } = parseInput(inputSchema, input);
  const [lot] = await selectLots(ctx, eq(lots.id, lotId));
  if (!lot) throw new EllwandError('not-found');
  return lot;
}
