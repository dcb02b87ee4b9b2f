import { systemContext } from '@/lib/auth/context';
import type { Health } from '@/lib/schemas/health';
import { readHealth } from '@/lib/services/health/read-health';

/** Whoever watches us gives up after 2 s; a database that does not answer must be said before that. */
const DATABASE_TIMEOUT_MS = 1_500;

const NOTHING_HEARD = { queue: false, worker: false, agents: { known: 0, heard: 0 } };

/** The health of the instance, within `timeoutMs` also when the database is dead or hangs. Never throws. */
export async function healthWithin(timeoutMs = DATABASE_TIMEOUT_MS): Promise<Health> {
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<null>((resolve) => {
    timer = setTimeout(() => resolve(null), timeoutMs);
  });
  const read = readHealth({ ctx: systemContext() }).catch((error: unknown) => {
    console.error('The health check found no database:', error);
    return null;
  });
  const found = await Promise.race([read, late]);
  clearTimeout(timer);
  const health = found ?? NOTHING_HEARD;
  const database = found !== null;
  return { ok: database && health.queue && health.worker, database, ...health };
}
