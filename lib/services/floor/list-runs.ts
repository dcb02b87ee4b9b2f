import { and, eq, inArray } from 'drizzle-orm';
import { z } from 'zod';
import { batchLines } from '@/db/schema/batches';
import { runs } from '@/db/schema/runs';
import { RUN_STATES } from '@/lib/fleet/run';
import type { RunDto } from '@/lib/schemas/run';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { selectRuns } from './run-rows';

/** All filters are optional; `state` may be several, with commas between. */
export const listRunsSchema = z.object({
  rigId: z.uuid().optional(),
  batchId: z.uuid().optional(),
  lotId: z.uuid().optional(),
  state: z
    .string()
    .transform((text) => text.split(','))
    .pipe(z.array(z.enum(RUN_STATES)))
    .optional(),
  limit: z.coerce.number().int().min(1).max(500).default(100),
  offset: z.coerce.number().int().min(0).default(0),
});

/** Runs with their counts, the newest first, to anyone signed in. */
export async function listRuns({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<RunDto[]> {
  authorise(ctx, 'floor.read');
  const { rigId, batchId, lotId, state, limit, offset } = parseInput(listRunsSchema, input);
  const where = and(
    rigId ? eq(runs.rigId, rigId) : undefined,
    batchId ? eq(batchLines.batchId, batchId) : undefined,
    lotId ? eq(runs.lotId, lotId) : undefined,
    state ? inArray(runs.state, state) : undefined,
  );
  return selectRuns(ctx, where, { limit, offset });
}
