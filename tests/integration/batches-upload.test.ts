import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { DEMO_WIRES } from '@/db/seed/demo/stock';
import { repo } from '@/scripts/house/repo.mjs';
import { createBatchFromUpload } from '@/lib/services/batches/create-batch-from-upload';
import { previewUpload } from '@/lib/services/batches/preview-upload';
import { readBatch } from '@/lib/services/batches/read-batch';
import { addWire } from '@/lib/services/wires/add-wire';
import { errorCode } from '@/tests/support/floor-world';
import { openWorld, type World } from '@/tests/support/setup-world';

const HEADER = 'label,length_mm,pieces,gauge_awg,insulation,colour';
const bytesOf = (text: string) => new TextEncoder().encode(text);

let world: World;
let example: Uint8Array;

beforeAll(async () => {
  world = await openWorld();
  example = await readFile(join(repo, 'public/examples/larch-counter.csv'));
  for (const wire of DEMO_WIRES) {
    await addWire({ ctx: await world.as('owner'), input: { ...wire, conductor: 'silver-plated copper' } });
  }
});
afterAll(() => world.close());

async function preview(bytes: Uint8Array, fileName = 'list.csv') {
  return previewUpload({ ctx: await world.as('scheduler'), input: { fileName }, bytes });
}

async function create(bytes: Uint8Array, input: object) {
  return createBatchFromUpload({ ctx: await world.as('scheduler'), input, bytes });
}

async function batchCount(): Promise<number> {
  return (await world.query('select 1 from batches')).length;
}

describe('uploading a cut list', () => {
  it('understands each of the 40 lines of the shipped example with the demo’s wires, and saves nothing yet', async () => {
    const seen = await preview(example);
    expect(seen).toMatchObject({ fileName: 'list.csv', problems: [], warnings: [], sameFile: null });
    expect(seen.lines).toHaveLength(40);
    expect(seen.lines.map(({ row }) => row)).toEqual(Array.from({ length: 40 }, (_, index) => index + 2));
    expect(seen.lines.filter(({ wire, lengthMm, pieces }) => !wire || !lengthMm || !pieces)).toEqual([]);
    expect(await batchCount()).toBe(0);
  });

  it('makes a queued batch of the example, as previewed', async () => {
    const { lines } = await preview(example);
    const input = { fileName: 'larch-counter.csv', name: 'Larch counter', queue: 'true', priority: '2' };
    const { batchId } = await create(example, input);
    const batch = await readBatch({ ctx: await world.as('operator'), input: { batchId } });
    expect(batch).toMatchObject({ state: 'queued', priority: 2, sourceName: 'larch-counter.csv', lines: 40 });
    expect(batch.pieces).toBe(lines.reduce((sum, line) => sum + (line.pieces ?? 0), 0));
    expect(batch.lineList.map(({ label, lengthMm, pieces }) => [label, lengthMm, pieces])).toEqual(
      lines.map(({ label, lengthMm, pieces }) => [label, lengthMm, pieces]),
    );
  });

  it('tells that the same file was uploaded before, under whatever name, and saves it only when confirmed', async () => {
    const bytes = bytesOf(`${HEADER}\nA1,63.5,40,30,ETFE,GN\n`);
    const { batchId } = await create(bytes, { name: 'First' });
    expect((await preview(bytes, 'other.csv')).sameFile).toMatchObject({ batchId, name: 'First' });
    const count = await batchCount();
    await expect(create(bytes, { name: 'Second' })).rejects.toMatchObject({
      code: 'same-file',
      details: { batchId, name: 'First' },
    });
    expect(await batchCount()).toBe(count);
    await create(bytes, { name: 'Second', sameFileConfirmed: 'true' });
    expect(await batchCount()).toBe(count + 1);
  });

  it('of one file twice at the same moment saves it once', async () => {
    const bytes = bytesOf(`${HEADER}\nB1,63.5,40,30,ETFE,GN\n`);
    const count = await batchCount();
    const settled = await Promise.allSettled([
      create(bytes, { name: 'One' }),
      create(bytes, { name: 'Two' }),
    ]);
    expect(settled.map(({ status }) => status).sort()).toEqual(['fulfilled', 'rejected']);
    expect(await batchCount()).toBe(count + 1);
  });

  it('saves nothing of a file with a bad cell, and names row, column and what to write', async () => {
    const bytes = bytesOf(`${HEADER}\nA1,63.5,40,30,ETFE,GN\nA2,long,40,30,ETFE,GN\n`);
    const count = await batchCount();
    await expect(create(bytes, { name: 'Bad' })).rejects.toMatchObject({
      code: 'bad-input',
      fields: [{ path: 'row 3, length_mm', message: expect.stringMatching(/Found long\. Write a number/) }],
    });
    expect(await batchCount()).toBe(count);
  });

  it('is refused to operators, before the file is read', async () => {
    const ctx = await world.as('operator');
    await expect(previewUpload({ ctx, input: {}, bytes: example })).rejects.toEqual(errorCode('not-allowed'));
    const made = createBatchFromUpload({ ctx, input: { name: 'x' }, bytes: example });
    await expect(made).rejects.toEqual(errorCode('not-allowed'));
  });
});
