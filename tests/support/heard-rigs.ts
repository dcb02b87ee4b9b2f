import { hearRigs } from '@/tests/support/batch-world';
import type { FloorWorld } from '@/tests/support/floor-world';

const REPORT_EVERY_MS = 1_000;

/** Brings the floor onto the real clock, on which a worker runs, and lets its idle rigs be heard until it is stopped. */
export async function keepHeard(floor: FloorWorld): Promise<() => void> {
  const hear = async () => {
    floor.clock.nowMs = Date.now();
    await hearRigs(floor);
  };
  await hear();
  const timer = setInterval(
    () => void hear().catch((cause: unknown) => console.error(cause)),
    REPORT_EVERY_MS,
  );
  return () => clearInterval(timer);
}

interface Counts {
  given: number;
  runs: number;
  commands: number;
  wishes: number;
}

/** How many lots were given, by how many runs and commands, and the wishes for dispatch that are still open. */
export async function countGiven(floor: FloorWorld): Promise<Counts> {
  const [counts] = await floor.world.query<Counts>(`
    select (select count(*) from lots where state = 'given')::int as given,
      (select count(*) from runs)::int as runs,
      (select count(*) from commands where kind = 'take-program')::int as commands,
      (select count(*) from outbox where done_at is null and topic = 'dispatch')::int as wishes`);
  if (!counts) throw new Error('The counts could not be read');
  return counts;
}
