import { sql } from 'drizzle-orm';
import { EllwandError } from '@/lib/errors';
import type { BatchLineInput } from '@/lib/schemas/batches';
import { createFromUploadSchema } from '@/lib/schemas/upload';
import type { CutListLine, CutListReading } from '@/lib/wire/cut-list/reading';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';
import { insertBatch } from './insert-batch';
import { makeLots } from './make-lots';
import { readUpload } from './read-upload';
import { fileDigest, findSameFile } from './same-file';

function lineOf(line: CutListLine): BatchLineInput | null {
  const { label, wire, lengthMm, toleranceMinusMm, tolerancePlusMm, pieces } = line;
  if (label === null || wire === null || lengthMm === null || pieces === null) return null;
  if (toleranceMinusMm === null || tolerancePlusMm === null) return null;
  return { label, wireId: wire.id, lengthMm, toleranceMinusMm, tolerancePlusMm, pieces };
}

/** @throws EllwandError `bad-input` with one problem a bad cell: nothing is saved of a file that is not all right. */
function linesOf({ lines, problems }: CutListReading): BatchLineInput[] {
  if (problems.length > 0) {
    const fields = problems.map(({ row, column, found, instead }) => ({
      path: [row === null ? 'file' : `row ${row}`, column].filter(Boolean).join(', '),
      message: `Found ${found}. ${instead}`,
    }));
    throw new EllwandError('bad-input', { fields });
  }
  return lines.flatMap((line) => lineOf(line) ?? []);
}

/**
 * Makes a batch of a cut list file. The file is read again here: what the browser showed is not trusted.
 * @throws EllwandError `bad-input` for bad cells, `same-file` (with the batch in `details`) when it was uploaded before
 * and that was not confirmed.
 */
export async function createBatchFromUpload({
  ctx,
  input,
  bytes,
}: {
  ctx: ServiceContext;
  input: unknown;
  bytes: Uint8Array;
}): Promise<{ batchId: string }> {
  const actor = authorise(ctx, 'batches.write');
  const { fileName, name, dueAt, priority, queue, sameFileConfirmed } = parseInput(
    createFromUploadSchema,
    input,
  );
  const lines = linesOf(await readUpload(ctx, bytes));
  const sha256 = fileDigest(bytes);
  return inTransaction({ ...ctx, actor }, async (inner) => {
    // Two uploads of one file at the same moment: the second must see the first.
    await inner.db.execute(sql`select pg_advisory_xact_lock(hashtextextended(${sha256}, 0))`);
    const same = await findSameFile(inner, sha256);
    if (same && !sameFileConfirmed) throw new EllwandError('same-file', { details: { ...same } });
    const batchId = await insertBatch(inner, { name, dueAt, priority, lines }, { name: fileName, sha256 });
    if (queue) await makeLots(inner, batchId);
    return { batchId };
  });
}
