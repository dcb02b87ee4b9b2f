import { and, eq, inArray, sql } from 'drizzle-orm';
import { batches, batchLines, lots } from '@/db/schema/batches';
import { bags, runs } from '@/db/schema/runs';
import { EllwandError } from '@/lib/errors';
import { readBagCode } from '@/lib/fleet/bag-code';
import { type BagDto, confirmBagSchema } from '@/lib/schemas/run';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { clearTray } from './clear-tray';
import { readBag } from '../floor/read-bag';

async function runInTray(ctx: ServiceContext, code: string): Promise<string | null> {
  const names = readBagCode(code);
  if (!names) return null;
  const [run] = await ctx.db
    .select({ id: runs.id })
    .from(runs)
    .innerJoin(lots, eq(lots.id, runs.lotId))
    .innerJoin(batchLines, eq(batchLines.id, lots.lineId))
    .innerJoin(batches, eq(batches.id, batchLines.batchId))
    .where(
      and(
        eq(batches.number, names.batchNumber),
        eq(batchLines.position, names.linePosition),
        eq(lots.number, names.lotNumber),
        sql`upper(left(${runs.id}::text, 4)) = ${names.runDigits}`,
        inArray(runs.state, ['ended', 'released']),
      ),
    );
  return run?.id ?? null;
}

/**
 * A person scanned a bag's code. Where the run still lies in its tray, that confirms the bag with what was entered so
 * far and makes the rig ready; a second scan only answers the bag.
 * @throws EllwandError `not-found` for a code that is no bag's.
 */
export async function confirmBag({ ctx, input }: { ctx: ServiceContext; input: unknown }): Promise<BagDto> {
  authorise(ctx, 'runs.operate');
  const { code } = parseInput(confirmBagSchema, input);
  const [bag] = await ctx.db.select({ id: bags.id }).from(bags).where(eq(bags.code, code));
  if (!bag) {
    const runId = await runInTray(ctx, code);
    if (!runId) throw new EllwandError('not-found');
    await clearTray({ ctx, input: { runId, scrapped: 0, sampled: 0 } });
  }
  return readBag({ ctx, input: { code } });
}
