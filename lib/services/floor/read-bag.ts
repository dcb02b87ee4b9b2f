import { eq } from 'drizzle-orm';
import { z } from 'zod';
import { batches, batchLines, lots } from '@/db/schema/batches';
import { people } from '@/db/schema/people';
import { rigs } from '@/db/schema/rigs';
import { bags, runs } from '@/db/schema/runs';
import { blades, spools, wires } from '@/db/schema/stock';
import { EllwandError } from '@/lib/errors';
import type { BagDto } from '@/lib/schemas/run';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { wireDto } from '../wires/wire-dto';

const readBagSchema = z.union([z.object({ runId: z.uuid() }), z.object({ code: z.string().max(40) })]);

/** A bag as its label says it, by its run or its code. @throws EllwandError `not-found` */
export async function readBag({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<BagDto> {
  authorise(ctx, 'floor.read');
  const asked = parseInput(readBagSchema, input);
  const [found] = await ctx.db
    .select({
      bag: bags,
      run: runs,
      lot: lots,
      line: batchLines,
      batch: batches,
      wire: wires,
      rigName: rigs.name,
      bladeLabel: blades.label,
      spoolLabel: spools.label,
      clearedByName: people.name,
    })
    .from(bags)
    .innerJoin(runs, eq(runs.id, bags.runId))
    .innerJoin(lots, eq(lots.id, runs.lotId))
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(batches, eq(batches.id, batchLines.batchId))
    .innerJoin(wires, eq(wires.id, runs.wireId))
    .innerJoin(rigs, eq(rigs.id, runs.rigId))
    .innerJoin(people, eq(people.id, bags.clearedBy))
    .leftJoin(blades, eq(blades.id, runs.bladeId))
    .leftJoin(spools, eq(spools.id, runs.spoolId))
    .where('runId' in asked ? eq(bags.runId, asked.runId) : eq(bags.code, asked.code.toUpperCase()));
  if (!found) throw new EllwandError('not-found');
  const { bag, run, lot, line, batch } = found;
  return {
    code: bag.code,
    runId: run.id,
    batchName: batch.name,
    batchNumber: batch.number,
    lotNumber: lot.number,
    lineLabel: line.label,
    wire: wireDto(found.wire),
    lengthMm: run.lengthMm,
    toleranceMinusMm: line.toleranceMinusMm,
    tolerancePlusMm: line.tolerancePlusMm,
    pieces: bag.pieces,
    rigName: found.rigName,
    bladeLabel: found.bladeLabel,
    spoolLabel: found.spoolLabel,
    clearedByName: found.clearedByName,
    clearedAt: bag.clearedAt.toISOString(),
  };
}
