import { eq } from 'drizzle-orm';
import { z } from 'zod';
import { runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import { bagCode } from '@/lib/fleet/bag-code';
import { baggedOf } from '@/lib/fleet/counts';
import type { LabelDto } from '@/lib/schemas/run';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { pieceSums } from '../runs/piece-sums';
import { bagDto, confirmedBag, selectBagRow } from './bag-rows';

const readLabelSchema = z.object({ runId: z.uuid() });

/**
 * A run's label: of its bag, or, while the pieces still lie in the tray, the one to print first and to scan then, in
 * the name of whoever prints it. @throws EllwandError `not-found` for a run that is not over or gave no piece.
 */
export async function readLabel({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<LabelDto> {
  const person = authorise(ctx, 'floor.read');
  const { runId } = parseInput(readLabelSchema, input);
  const row = await selectBagRow(ctx, eq(runs.id, runId));
  const bag = confirmedBag(row);
  if (bag) return { bag, confirmed: true };
  if (!row || (row.run.state !== 'ended' && row.run.state !== 'released'))
    throw new EllwandError('not-found');
  const pieces = baggedOf(row.run.cut, await pieceSums(ctx, runId));
  if (pieces <= 0) throw new EllwandError('not-found');
  const { batch, line, lot } = row;
  const code = bagCode({
    batchNumber: batch.number,
    linePosition: line.position,
    lotNumber: lot.number,
    runId,
  });
  const own = { code, pieces, clearedByName: person.name, clearedAt: ctx.now.toISOString() };
  return { bag: bagDto(row, own), confirmed: false };
}
