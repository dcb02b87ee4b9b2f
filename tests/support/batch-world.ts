import type { BatchLineInput } from '@/lib/schemas/batches';
import { createBatch } from '@/lib/services/batches/create-batch';
import { type FloorWorld, goodReport, report } from '@/tests/support/floor-world';

/** One line of the floor's wire. */
export function lineOf(floor: FloorWorld, change: Partial<BatchLineInput> = {}): BatchLineInput {
  const base = { label: 'A1', wireId: floor.wireId, lengthMm: 100, toleranceMinusMm: 0, tolerancePlusMm: 3 };
  return { ...base, pieces: 20, ...change };
}

/** A batch made by the scheduler through the service, queued unless said otherwise. Answers its id. */
export async function makeBatch(
  floor: FloorWorld,
  lines: BatchLineInput[],
  change: { name?: string; priority?: number; dueAt?: string | null; queue?: boolean } = {},
): Promise<string> {
  const input = { name: 'Panel loom', dueAt: null, priority: 3, queue: true, ...change, lines };
  return (await createBatch({ ctx: await floor.as('scheduler'), input })).batchId;
}

/** The agent says of all its rigs that they are open and idle. */
export async function hearRigs(floor: FloorWorld, rigIds = floor.rigIds): Promise<void> {
  await report(floor, ...rigIds.map((rigId) => goodReport(floor, rigId, { runner: 'idle' })));
}
