import { eq } from 'drizzle-orm';
import { z } from 'zod';
import { runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import type { RunDto } from '@/lib/schemas/run';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { selectRuns } from './run-rows';

const readRunSchema = z.object({ runId: z.uuid() });

/** One run with its counts. @throws EllwandError `not-found` */
export async function readRun({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<RunDto> {
  authorise(ctx, 'floor.read');
  const { runId } = parseInput(readRunSchema, input);
  const [run] = await selectRuns(ctx, eq(runs.id, runId));
  if (!run) throw new EllwandError('not-found');
  return run;
}
