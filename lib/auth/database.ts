import { openDatabase, type Database } from '@/db/client';
import { webEnv } from '@/lib/env/web';

/** A page may wait for a busy computer; the health check has a shorter limit of its own. */
const LIMITS = { connectionsMax: 15, connectTimeoutMs: 5_000 };

let opened: Database | undefined;

/** The web process's one pool of connections, opened at the first use. */
export function database(): Database {
  opened ??= open();
  return opened;
}

function open(): Database {
  const { db, pool } = openDatabase(webEnv().databaseUrl, LIMITS);
  // An idle connection that dies is replaced at the next use; without a listener it would end the process.
  pool.on('error', (error) => console.error('An idle database connection was lost:', error.message));
  return db;
}
