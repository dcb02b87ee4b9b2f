import { openDatabase } from '@/db/client';
import type { ServiceContext, SystemActor } from './context';

/** The services of one background process: contexts for Ellwand itself, and the end of its connections. */
export interface OpenServices {
  context: () => ServiceContext<SystemActor>;
  close: () => Promise<void>;
}

/** Opens the database for a process without people. `requestId` names each context; `onError` hears of lost connections. */
export function openServices(
  databaseUrl: string,
  options: { now: () => Date; requestId: () => string; onError: (cause: Error) => void },
): OpenServices {
  const { db, pool } = openDatabase(databaseUrl, { connectionsMax: 6 });
  pool.on('error', options.onError);
  return {
    context: () => ({ actor: { kind: 'system' }, db, now: options.now(), requestId: options.requestId() }),
    close: () => pool.end(),
  };
}
