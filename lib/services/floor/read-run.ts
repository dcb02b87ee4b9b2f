import { eq } from 'drizzle-orm';
import { runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import type { RunDto } from '@/lib/schemas/run';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { selectRuns } from './run-rows';

/** One run with its counts. @throws EllwandError `not-found` */
export async function readRun({ ctx, runId }: { ctx: ServiceContext; runId: string }): Promise<RunDto> {
  authorise(ctx, 'floor.read');
  const [run] = await selectRuns(ctx, eq(runs.id, runId));
  if (!run) throw new EllwandError('not-found');
  return run;
}
