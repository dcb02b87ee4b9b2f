import { createBatch } from '@/lib/services/batches/create-batch';
import type { DemoContexts } from './demo-contexts';
import { DEMO_BATCHES } from './demo/batches';
import { wireKey } from './demo/stock';

const HOUR_MS = 3_600_000;

/** Queues the demo's batches in the scheduler's name; lots go to rigs once the worker runs. */
export async function queueDemoBatches(as: DemoContexts, wireIds: Map<string, string>): Promise<void> {
  const ctx = as.scheduler;
  for (const { name, dueInHours, priority, lines } of DEMO_BATCHES) {
    const dueAt = dueInHours === null ? null : new Date(ctx.now.getTime() + dueInHours * HOUR_MS);
    const input = {
      name,
      priority,
      dueAt: dueAt?.toISOString() ?? null,
      queue: true,
      lines: lines.map(({ label, lengthMm, pieces, ...wire }) => ({
        label,
        lengthMm,
        pieces,
        wireId: wireIds.get(wireKey(wire)),
        toleranceMinusMm: 0,
        tolerancePlusMm: 3,
      })),
    };
    await createBatch({ ctx, input });
  }
}
