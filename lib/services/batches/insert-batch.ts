import { batches, batchLines } from '@/db/schema/batches';
import { EllwandError } from '@/lib/errors';
import type { BatchInput, BatchLineInput } from '@/lib/schemas/batches';
import { audit } from '../audit';
import type { PersonActor, ServiceContext } from '../context';
import { tell } from '../tell';
import { inParts } from './insert-rows';
import { requireWires } from './require-wires';

/** Appends lines to a batch from `position` on. */
export function insertLines(
  ctx: ServiceContext,
  batchId: string,
  lines: readonly BatchLineInput[],
  position = 1,
): Promise<void> {
  const rows = lines.map((line, index) => ({
    batchId,
    position: position + index,
    label: line.label,
    wireId: line.wireId,
    lengthMm: line.lengthMm,
    toleranceMinusMm: line.toleranceMinusMm,
    tolerancePlusMm: line.tolerancePlusMm,
    pieces: line.pieces,
  }));
  return inParts(rows, (part) => ctx.db.insert(batchLines).values(part));
}

/** Writes a batch with its lines as a draft; part of the caller's transaction. */
export async function insertBatch(
  ctx: ServiceContext<PersonActor>,
  batch: BatchInput,
  source: { name: string; sha256: string } | null,
): Promise<string> {
  await requireWires(ctx, batch.lines);
  const [row] = await ctx.db
    .insert(batches)
    .values({
      name: batch.name,
      dueAt: batch.dueAt === null ? null : new Date(batch.dueAt),
      priority: batch.priority,
      sourceName: source?.name ?? null,
      sourceSha256: source?.sha256 ?? null,
      createdBy: ctx.actor.personId,
      createdAt: ctx.now,
    })
    .returning({ id: batches.id, number: batches.number });
  if (!row) throw new EllwandError('unexpected');
  await insertLines(ctx, row.id, batch.lines);
  const pieces = batch.lines.reduce((sum, line) => sum + line.pieces, 0);
  const details = { number: row.number, lines: batch.lines.length, pieces, source: source?.name ?? null };
  await audit(ctx, 'batch.create', `batch:${row.id}`, details);
  await tell(ctx, { news: 'batch', batchId: row.id });
  return row.id;
}
